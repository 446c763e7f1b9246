using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Reads meters of a fixture file.</summary>
internal static class MeterReader
{
    private const double PartsPerMillion = 1e-6;
    private const double Micro = 1e-6;
    private const double Percent = 0.01;

    internal static Meter Meter(MappingReader reader, FixtureNames names)
    {
        string name = names.Meters.Declare(reader);
        (DateOnly on, DateOnly due) = LoadReader.Dates(reader);
        Meter meter = new(
            name,
            names.Links.Refer(reader, "link"),
            reader.Text("identity"),
            reader.Duration("integration_ms", NumberRange.PositiveUpTo(10_000)),
            reader.Number("power_line_cycles", NumberRange.PositiveUpTo(500)),
            reader.Text("certificate"),
            on,
            due,
            reader.Mappings("ranges", 1, Range));
        LinkReader.UseLink(reader, meter.Link, isMeter: true, names);
        names.Later(() => LinkReader.CheckTimeout(reader, "integration_ms", meter.Integration, meter.Link, names));
        CheckRanges(reader, meter);
        CheckIntegration(reader, meter);
        return meter;
    }

    private static MeterRange Range(MappingReader reader)
    {
        double fullScale = reader.Number("full_scale_v", NumberRange.PositiveUpTo(1000));
        return new(
            fullScale,
            reader.Number("gain_ppm", NumberRange.UpTo(1e5)) * PartsPerMillion,
            reader.Number("offset_ppm_of_range", NumberRange.UpTo(1e5)) * PartsPerMillion * fullScale,
            reader.Number("noise_uv", NumberRange.ZeroOrMore) * Micro,
            reader.Integer("noise_degrees_of_freedom", 50, int.MaxValue),
            reader.Number("resolution_uv", NumberRange.Positive) * Micro,
            reader.NumberOrInfinite("input_ohm", NumberRange.Positive),
            reader.Number("input_tolerance_percent", NumberRange.UpTo(50)) * Percent);
    }

    private static void CheckRanges(MappingReader reader, Meter meter)
    {
        for (int i = 1; reader.Bound("ranges") && i < meter.Ranges.Count; i++)
        {
            if (meter.Ranges[i].FullScaleVolt <= meter.Ranges[i - 1].FullScaleVolt)
            {
                reader.Mistake(
                    "ranges", $"range {i} is not above the one before it", "list the ranges in ascending order");
            }
        }
    }

    // The integration time and the setting sent to the meter say the same thing twice; mains are 50 or 60 Hz.
    private static void CheckIntegration(MappingReader reader, Meter meter)
    {
        if (!reader.Bound("integration_ms", "power_line_cycles"))
        {
            return;
        }

        double hertz = meter.PowerLineCycles / meter.Integration.TotalSeconds;
        if (Math.Abs(hertz - 50.0) > 0.5 && Math.Abs(hertz - 60.0) > 0.6)
        {
            reader.Mistake(
                "integration_ms", "does not fit power_line_cycles at 50 or 60 Hz",
                "one cycle takes 20 ms at 50 Hz and 16.67 ms at 60 Hz");
        }
    }
}
