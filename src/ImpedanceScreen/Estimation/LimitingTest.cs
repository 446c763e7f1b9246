using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Statistics;

namespace ImpedanceScreen.Estimation;

/// <summary>Where an output begins to limit.</summary>
/// <param name="Load">The first load at which the voltage falls below the line of the lighter ones.</param>
/// <param name="ReadVolt">What was read there, V.</param>
/// <param name="ExpectedVolt">What the line of the lighter loads gives there, V.</param>
/// <param name="LineAmpere">Load current of the last point on the line, A.</param>
/// <param name="KneeAmpere">Load current at the first point below it, A.</param>
internal sealed record Knee(
    Load Load, double ReadVolt, double ExpectedVolt, double LineAmpere, double KneeAmpere);

/// <summary>
/// Finds the load current beyond which the voltage falls faster than the line of the lighter loads. The statistic is
/// the
/// rise of chi-squared when the point joins the fit: the squared difference from the prediction over its variance, all
/// common errors considered. Planner and diagnosis ask it in the same way.
/// </summary>
internal static class LimitingTest
{
    /// <summary>Looks for the knee.</summary>
    /// <param name="set">Numeric readings, at least one unloaded.</param>
    /// <param name="rate">False-alarm rate of the test over all its looks.</param>
    public static Knee? Find(ReadingSet set, double rate)
    {
        // A load that never came on would make the next one look like a knee: only loads with a visible current count.
        IEnumerable<LoadPointReadings> loaded = set.Loaded.Where(read => LoadCurrentTest.Changes(set, read));
        LoadPointReadings[] points = [set.Unloaded[0], .. loaded];
        int looks = Math.Max(1, set.Job.Loads.Count - 1);
        SourceFit line = points.Length < 3 ? default : SourceFitter.Fit(set.Measure(points[..2], null).Problem);
        for (int count = 3; count <= points.Length; count++)
        {
            StateMeasurement with = set.Measure(points[..count], null);
            SourceFit all = SourceFitter.Fit(with.Problem);
            if (Look(with, line, all, points[..count], rate / looks) is { } knee)
            {
                return knee;
            }

            line = all;
        }

        return null;
    }

    private static Knee? Look(
        StateMeasurement with, in SourceFit line, in SourceFit all, LoadPointReadings[] points, double rate)
    {
        Load load = points[^1].Point.Load!;
        double read = ReadingSet.Mean(points[^1]).Volt;
        double back = with.ReturnVolt;
        double ohm = with.Paths[with.LoadIndex(load)].Ohm;
        if (!line.Converged)
        {
            return null;
        }

        double expected = new SourceModel(
            line.SourceVoltageVolt, line.ResistanceOhm, back, 1 / ohm, with.MeterSiemens).Volt;
        bool falls = (expected - read) * Math.Sign(expected - back) > 0;

        // The meter's noise is itself an estimate, hence F rather than chi-squared; one-sided, hence half. A point that
        // admits no source at all together with the others is beyond any line.
        double rise = all.Converged ? Math.Max(0, all.ChiSquared - line.ChiSquared) : double.PositiveInfinity;
        double tail = 0.5 * UpperTail.VarianceRatio(rise, 1, with.Job.Range.NoiseDegreesOfFreedom);
        if (!falls || tail >= rate)
        {
            return null;
        }

        PointMean last = ReadingSet.Mean(points[^2]);
        double lastAmpere = (last.Volt - back) / with.Paths[with.LoadIndex(last.Load)].Ohm;
        return new(load, read, expected, Math.Abs(lastAmpere), Math.Abs((read - back) / ohm));
    }
}
