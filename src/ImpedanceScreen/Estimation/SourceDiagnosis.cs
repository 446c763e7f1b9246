using System.Globalization;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.Statistics;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Names what is not a linear source. Each statistical test keeps the rate it is given: scatter against the meter's
/// pooled noise (F), limiting and lack of fit (chi-squared, as F since the noise is itself an estimate), recovery (t).
/// </summary>
internal static class SourceDiagnosis
{
    /// <summary>Share of the nominal voltage below which an output is called dead rather than off.</summary>
    private const double DeadShare = 0.02;

    /// <summary>What the readings say before anything is fitted; null where nothing is wrong.</summary>
    /// <param name="set">The readings.</param>
    /// <param name="rate">False-alarm rate of each test.</param>
    public static SourceFault? BeforeFit(ReadingSet set, double rate) =>
        ConditionFault(set)
        ?? RailFault(set)
        ?? UnloadedFault(set)
        ?? ScatterFault(set, rate)
        ?? (set.Unloaded.Length == 0 ? null : LimitingFault(set, rate))
        ?? LoadCurrentTest.Find(set)
        ?? RecoveryFault(set, rate);

    /// <summary>What the fit says.</summary>
    public static SourceFault? OfFit(ReadingSet set, in SourceFit fit, double rate)
    {
        if (fit.Converged && IsStraight(set, fit, rate))
        {
            return null;
        }

        return LoadCurrentTest.FindBehindContact(set, others => FitsWithout(set, others, rate)) ?? NoStraightLine(fit);
    }

    private static SourceFault NoStraightLine(in SourceFit fit)
    {
        if (!fit.Converged)
        {
            return new(
                SourceFaultKind.LoadNotProved,
                "too little load current: the readings do not determine the internal resistance; look at loads "
                    + "and return",
                OfFixture: true);
        }

        string chiSquared = fit.ChiSquared.ToString("0.#", CultureInfo.InvariantCulture);
        string degrees = fit.DegreesOfFreedom.ToString(CultureInfo.InvariantCulture);
        return new(
            SourceFaultKind.Curved,
            $"curved: no straight line of voltage against current within the uncertainty (chi-squared "
                + $"{chiSquared} with "
            + $"{degrees} degrees of freedom); look at the output stage",
            OfFixture: false);
    }

    private static bool IsStraight(ReadingSet set, in SourceFit fit, double rate)
    {
        int degrees = fit.DegreesOfFreedom;
        return degrees < 1 || UpperTail.VarianceRatio(
            fit.ChiSquared / degrees, degrees, set.Job.Range.NoiseDegreesOfFreedom) >= rate;
    }

    private static bool FitsWithout(ReadingSet set, LoadPointReadings[] others, double rate)
    {
        SourceFit fit = SourceFitter.Fit(set.Measure(others, null).Problem);
        return fit is { Converged: true, DegreesOfFreedom: > 0 } && IsStraight(set, fit, rate);
    }

    private static SourceFault? ConditionFault(ReadingSet set)
    {
        foreach (LoadPointReadings read in set.All)
        {
            bool rail = read.Point.Sensed == Sensed.LoadReturn;
            string place = rail ? "load return" : PlaceOf(read);
            if (read.Readings.Any(reading => reading.Condition == ReadingCondition.Overload))
            {
                return new(
                    SourceFaultKind.Overload,
                    $"overload: beyond the {UncertainText.Voltage(set.Job.Range.FullScaleVolt)} range, {place}",
                    OfFixture: rail);
            }

            if (read.Readings.Count == 0 || read.Readings.Any(reading => !double.IsFinite(reading.Volt)))
            {
                return new(
                    SourceFaultKind.NoNumber, $"the meter gave no number, {place}; look at meter and link",
                        OfFixture: true);
            }
        }

        return null;
    }

    private static SourceFault? RailFault(ReadingSet set)
    {
        if (set.IsRailAsStated)
        {
            return null;
        }

        LoadReturn rail = set.Job.LoadReturn!;
        return new(
            SourceFaultKind.LoadNotProved,
            $"load return '{rail.Name}' reads {UncertainText.Voltage(set.RailMean!.Value.Volt)} where "
                + $"{UncertainText.Voltage(rail.VoltageVolt.Value)} is stated: loads would draw another current, or none; "
                + "look at the rail's supply and relay",
            OfFixture: true);
    }

    private static SourceFault? UnloadedFault(ReadingSet set)
    {
        if (set.Unloaded.Length == 0)
        {
            return null;
        }

        double volt = ReadingSet.Mean(set.Unloaded[0]).Volt;
        Window window = set.Job.State.UnloadedWindowVolt;
        if (window.Contains(volt))
        {
            return null;
        }

        double nominal = set.Job.State.Nominal.SourceVoltageVolt;
        double dead = Math.Max(DeadShare * Math.Abs(nominal), 3 * set.Job.Range.OffsetLimitVolt);
        string due = $"{UncertainText.Voltage(window.Min)} to {UncertainText.Voltage(window.Max)}";
        string read = UncertainText.Voltage(volt);
        if (Math.Abs(volt) <= dead && !window.Contains(0))
        {
            return new(
                SourceFaultKind.NoSource,
                $"no source: {read} unloaded where {due} is due; look at supply, output joint and sense contact",
                OfFixture: false);
        }

        string polarity = volt * nominal < 0 ? "wrong polarity, " : "";
        return new(
            SourceFaultKind.UnloadedOutsideWindow,
            $"{polarity}{read} unloaded where {due} is due; no load was connected", OfFixture: false);
    }

    private static SourceFault? ScatterFault(ReadingSet set, double rate)
    {
        double squares = 0;
        int degrees = 0;
        foreach (LoadPointReadings read in set.Output)
        {
            double mean = ReadingSet.Mean(read).Volt;
            squares += read.Readings.Sum(reading => (reading.Volt - mean) * (reading.Volt - mean));
            degrees += read.Readings.Count - 1;
        }

        if (degrees == 0)
        {
            return null;
        }

        // Readings that hover between two steps scatter by at most half a step, whatever their noise.
        double noise = set.Job.Range.NoiseVolt;
        double step = 0.5 * set.Job.Range.ResolutionVolt;
        double variance = (noise * noise) + (step * step);
        double tail = UpperTail.VarianceRatio(
            squares / degrees / variance, degrees, set.Job.Range.NoiseDegreesOfFreedom);
        return tail >= rate ? null : new(
            SourceFaultKind.Unstable,
            $"unstable: readings scatter by {UncertainText.Voltage(Math.Sqrt(squares / degrees))}, the meter by "
            + $"{UncertainText.Voltage(Math.Sqrt(variance))}; look for an oscillating or intermittent output",
            OfFixture: false);
    }

    private static SourceFault? LimitingFault(ReadingSet set, double rate) =>
        LimitingTest.Find(set, rate) is not { } knee ? null : new(
            SourceFaultKind.CurrentLimited,
            $"current-limited: on the line up to {UncertainText.Current(knee.LineAmpere)}, below it at load "
            + $"{knee.Load.Name} ({UncertainText.Voltage(knee.ReadVolt)} at "
                + $"{UncertainText.Current(knee.KneeAmpere)} where "
            + $"the line gives {UncertainText.Voltage(knee.ExpectedVolt)}); look for a weak output stage",
            OfFixture: false);

    private static SourceFault? RecoveryFault(ReadingSet set, double rate)
    {
        if (!set.ReadUnloadedAgain || set.Unloaded.Length < 2)
        {
            return null;
        }

        PointMean first = ReadingSet.Mean(set.Unloaded[0]);
        PointMean last = ReadingSet.Mean(set.Unloaded[^1]);
        ErrorDistribution error = LoadCurrentTest.DifferenceOf(set, first, last);
        double tail = UpperTail.StudentTwoSided(
            (last.Volt - first.Volt) / error.StandardUncertainty, error.DegreesOfFreedom);
        return tail >= rate ? null : new(
            SourceFaultKind.NotRecovered,
            $"did not come back: {UncertainText.Voltage(last.Volt)} unloaded after the loads, "
            + $"{UncertainText.Voltage(first.Volt)} before; look for slow settling, heating or a latched limit",
            OfFixture: false);
    }

    private static string PlaceOf(LoadPointReadings read) =>
        read.Point.Load is { } load ? $"at load {load.Name}" : "unloaded";
}
