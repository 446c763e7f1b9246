using System.Globalization;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Jobs;

/// <summary>
/// Whether a load may be closed on an output, by worst cases that no reading can soften. Checked when files are bound
/// and again before each switching. Pure functions; not a safety function in the sense of a standard.
/// </summary>
public static class SafeLoading
{
    // A rail may lie this many standard uncertainties away from its stated voltage.
    private const double RailCoverage = 3.0;

    /// <summary>Why a load must not be closed; null where it may.</summary>
    /// <param name="job">The job: its ceiling and board supply bound the voltages present.</param>
    /// <param name="state">The output and drive state.</param>
    /// <param name="load">The load to be closed.</param>
    public static string? Refusal(ScreeningJob job, StateJob state, Load load)
    {
        ArgumentNullException.ThrowIfNull(job);
        ArgumentNullException.ThrowIfNull(state);
        Window present = PresentVolt(
            state.State, state.LoadReturn, job.Fixture.BoardSupply, job.Limits.VoltageCeilingVolt);
        return Refusal(state.State, state.LoadReturn, load, present);
    }

    /// <summary>
    /// Every voltage that can be present at the output when something has failed, V: its unloaded window, the board's
    /// supply (never beyond the product's ceiling) and zero.
    /// </summary>
    public static Window PresentVolt(DriveState state, LoadReturn? loadReturn, BoardSupply? supply, double ceilingVolt)
    {
        ArgumentNullException.ThrowIfNull(state);
        double supplyVolt = Math.Clamp(supply?.VoltageVolt ?? 0.0, -ceilingVolt, ceilingVolt);
        double railVolt = loadReturn?.VoltageVolt.Value ?? 0.0;
        double[] all = [0.0, supplyVolt, railVolt, state.UnloadedWindowVolt.Min, state.UnloadedWindowVolt.Max];
        return new(all.Min(), all.Max());
    }

    /// <summary>Largest power in a load, W: no internal resistance, and the voltage farthest from the return.</summary>
    /// <param name="load">The load, at the lower end of its uncertainty and without its branch.</param>
    /// <param name="presentVolt">Every voltage that can be present, V.</param>
    /// <param name="loadReturn">Where the load returns to; null for common.</param>
    public static double LoadPowerWatt(Load load, Window presentVolt, LoadReturn? loadReturn)
    {
        ArgumentNullException.ThrowIfNull(load);
        double volt = LargestDifference(presentVolt, ReturnVolt(loadReturn));
        return volt * volt / LowestOhm(load);
    }

    /// <summary>
    /// Largest load current, A: an internal resistance of zero at the edge of the unloaded window, which the unloaded
    /// reading has proved before any load closes.
    /// </summary>
    public static double OutputCurrentAmpere(DriveState state, LoadReturn? loadReturn, Load load)
    {
        ArgumentNullException.ThrowIfNull(state);
        ArgumentNullException.ThrowIfNull(load);
        return LargestDifference(state.UnloadedWindowVolt, ReturnVolt(loadReturn)) / LowestOhm(load);
    }

    /// <summary>
    /// Largest power at the output's terminals, delivered or taken in, W, whatever its internal resistance.
    /// </summary>
    public static double OutputPowerWatt(DriveState state, LoadReturn? loadReturn, Load load)
    {
        ArgumentNullException.ThrowIfNull(state);
        ArgumentNullException.ThrowIfNull(load);
        Window rail = ReturnVolt(loadReturn);
        double largest = 0.0;
        foreach (double to in (double[])[rail.Min, rail.Max])
        {
            // V (V - V_ret) over the loaded voltages, which lie between window and return: its extremes are at the
            // ends and, where it turns, at half the return's voltage.
            double min = Math.Min(state.UnloadedWindowVolt.Min, to);
            double max = Math.Max(state.UnloadedWindowVolt.Max, to);
            foreach (double volt in (double[])[min, max, Math.Clamp(to / 2.0, min, max)])
            {
                largest = Math.Max(largest, Math.Abs(volt * (volt - to)));
            }
        }

        return largest / LowestOhm(load);
    }

    /// <summary>Where a load may return to, V: the rail within three standard uncertainties, or zero.</summary>
    public static Window ReturnVolt(LoadReturn? loadReturn)
    {
        if (loadReturn is null)
        {
            return new(0.0, 0.0);
        }

        double margin = RailCoverage * loadReturn.VoltageVolt.StandardUncertainty;
        return new(loadReturn.VoltageVolt.Value - margin, loadReturn.VoltageVolt.Value + margin);
    }

    /// <summary>Why a load must not be closed at these voltages; null where it may.</summary>
    internal static string? Refusal(DriveState state, LoadReturn? loadReturn, Load load, Window presentVolt)
    {
        double loadPower = LoadPowerWatt(load, presentVolt, loadReturn);
        if (loadPower > load.PowerRatingWatt)
        {
            return Over("take", loadPower, load.PowerRatingWatt, "W it is rated for");
        }

        double current = OutputCurrentAmpere(state, loadReturn, load);
        if (current > state.Allowed.CurrentAmpere)
        {
            return Over("draw", current, state.Allowed.CurrentAmpere, "A the output is allowed");
        }

        double power = OutputPowerWatt(state, loadReturn, load);
        if (power > state.Allowed.PowerWatt)
        {
            return Over("draw", power, state.Allowed.PowerWatt, "W the output is allowed");
        }

        return loadReturn is not null && current > loadReturn.CurrentLimitAmpere
            ? Over("draw", current, loadReturn.CurrentLimitAmpere, $"A that rail `{loadReturn.Name}` is limited to")
            : null;

        string Over(string verb, double value, double limit, string ofWhat) => string.Create(
            CultureInfo.InvariantCulture,
            $"load `{load.Name}` may {verb} {value:G3}, more than the {limit:G3} {ofWhat}");
    }

    private static double LowestOhm(Load load) => load.ResistanceOhm - load.ExpandedUncertaintyOhm;

    private static double LargestDifference(Window one, Window other) =>
        Math.Max(Math.Abs(one.Max - other.Min), Math.Abs(one.Min - other.Max));
}
