using ImpedanceScreen.Files;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Limits;

/// <summary>Reads one drive state of a limit file.</summary>
internal static class DriveStateReader
{
    // Two loads and the unloaded point leave one degree of freedom to test that the source is linear.
    private const int FewestLoads = 2;

    internal static DriveState Read(MappingReader reader, NameTable states, double ceilingVolt)
    {
        DriveState state = new(
            states.Declare(reader),
            reader.OptionalText("stimulus"),
            reader.Mapping("nominal", Nominal),
            reader.Mapping("unloaded_window_v", Window),
            reader.OptionalText("load_return"),
            Loads(reader),
            reader.Mapping("limits", QuantityLimitReader.Read),
            reader.Mapping("allowed", Allowed),
            reader.Duration("settle_ms", NumberRange.UpTo(60_000)),
            reader.Integer("readings_per_load_point", 1, 100));
        CheckVoltages(reader, state, ceilingVolt);
        CheckNominal(reader, state);
        return state;
    }

    private static IReadOnlyList<string> Loads(MappingReader reader)
    {
        IReadOnlyList<string> loads = reader.Texts("loads", 1);
        if (reader.Bound("loads") && loads.Count < FewestLoads)
        {
            reader.Mistake(
                "loads", "with one load nothing tests that the source is linear",
                "name at least two loads: with the unloaded point they leave one degree of freedom");
        }

        return loads;
    }

    private static NominalSource Nominal(MappingReader reader) => new(
        reader.Number("source_voltage_v", NumberRange.Any),
        reader.Number("internal_resistance_ohm", NumberRange.ZeroOrMore));

    private static Window Window(MappingReader reader)
    {
        Window window = new(reader.Number("min", NumberRange.Any), reader.Number("max", NumberRange.Any));
        if (window.Min >= window.Max)
        {
            reader.Mistake("min", "the window is empty: min is not below max", "exchange or correct them");
        }

        return window;
    }

    private static AllowedLoading Allowed(MappingReader reader) => new(
        reader.Number("current_a", NumberRange.Positive),
        reader.Number("power_w", NumberRange.Positive),
        reader.Duration("dwell_s", NumberRange.PositiveUpTo(3600)));

    private static void CheckVoltages(MappingReader reader, DriveState state, double ceilingVolt)
    {
        const string problem = "beyond the file's `voltage_ceiling_v`";
        const string cure = "correct the voltage, or the ceiling where the board really carries more";
        if (reader.Bound("nominal") && Math.Abs(state.Nominal.SourceVoltageVolt) > ceilingVolt)
        {
            reader.Mistake("nominal", problem, cure);
        }

        if (reader.Bound("unloaded_window_v") && state.UnloadedWindowVolt.LargestMagnitude > ceilingVolt)
        {
            reader.Mistake("unloaded_window_v", problem, cure);
        }
    }

    private static void CheckNominal(MappingReader reader, DriveState state)
    {
        if (!reader.Bound("nominal"))
        {
            return;
        }

        NominalSource nominal = state.Nominal;
        if (reader.Bound("unloaded_window_v") && !state.UnloadedWindowVolt.Contains(nominal.SourceVoltageVolt))
        {
            reader.Mistake(
                "unloaded_window_v", "does not hold the nominal source voltage",
                "widen the window: a good board would never be loaded");
        }

        if (!reader.Bound("limits"))
        {
            return;
        }

        foreach (QuantityLimit limit in state.Limits.Where(limit => !limit.Holds(limit.Of(nominal))))
        {
            reader.Mistake(
                "limits", $"`{QuantityLimitReader.KeyOf(limit.Quantity)}` refuses the nominal source itself",
                "correct the limit or the nominal values");
        }

        bool droop = state.Limits.Any(limit => limit.Quantity == Quantity.Droop);
        if (droop && (nominal.SourceVoltageVolt == 0.0 || reader.Holds("load_return")))
        {
            reader.Mistake(
                "limits", "`droop_percent` is a part of the source voltage, loaded to common: it has no meaning here",
                "limit the internal resistance instead");
        }
    }
}
