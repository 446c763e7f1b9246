using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Statistics;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Whether load current is proved at each load point: by the mirror contact where the fixture declares it, else by a
/// change from the unloaded reading beyond its expanded uncertainty.
/// </summary>
internal static class LoadCurrentTest
{
    /// <summary>Probability of the interval of no change.</summary>
    private const double Probability = 0.999;

    /// <summary>Finds what is not proved; null where all is.</summary>
    public static SourceFault? Find(ReadingSet set)
    {
        string[] open = [.. set.Loaded.Where(read => read.ContactProved == false).Select(Name)];
        if (open.Length > 0)
        {
            return Fault($"load relay {List(open)} did not close: its contact reads open; look at relay and "
                + "coil wiring");
        }

        if (set.Unloaded.Length == 0)
        {
            return null;
        }

        string[] silent = [.. set.Loaded.Where(read => !IsProved(set, read)).Select(Name)];
        if (silent.Length == 0)
        {
            return IsSilentBehindContacts(set)
                ? Fault("no load changes the reading though their contacts read closed: path to the loads, their return "
                    + "or the sense path is open; look at selector relay, load probe and sense contact")
                : null;
        }

        return silent.Length == set.Loaded.Length && silent.Length > 1
            ? Fault("no load changes the reading: selector relay did not close, or the path to the loads or "
                + "their return "
                + "is open; look at selector relay, fixture contacts and the output's joint")
            : Fault($"load relay {List(silent)} did not close or joint open: no change from unloaded");
    }

    /// <summary>
    /// Where the whole does not fit: the loads that changed nothing, if without them all is well. Their contacts may
    /// read
    /// closed; the load behind them, or its joint, is open.
    /// </summary>
    public static SourceFault? FindBehindContact(ReadingSet set, Func<LoadPointReadings[], bool> fits)
    {
        LoadPointReadings[] changed = [.. set.Output.Where(read => read.Point.Load is null || Changes(set, read))];
        bool some = changed.Length < set.Output.Length && changed.Length > set.Unloaded.Length;
        if (!some || !fits(changed))
        {
            return null;
        }

        string names = List([.. set.Loaded.Except(changed).Select(Name)]);
        return Fault($"load {names} changes nothing though the other loads do: load, branch or joint open");
    }

    // A mirror contact proves that a relay moved, not that current flowed. Where a good output would show its heaviest
    // load beyond doubt, one that shows none at all is an open path and not a perfect source.
    private static bool IsSilentBehindContacts(ReadingSet set)
    {
        if (set.Loaded.MinBy(read => read.Point.Load!.ResistanceOhm) is not { } heaviest)
        {
            return false;
        }

        double due = LoadProof.NominalChangeVolt(set.Job, heaviest.Point.Load!);
        double known = LoadProof.ChangeUncertaintyVolt(set.Job.Range, heaviest.Readings.Count);
        return due >= LoadProof.ProvingFactor * known && !set.Loaded.Any(read => Changes(set, read));
    }

    private static bool IsProved(ReadingSet set, LoadPointReadings read) =>
        (set.Job.Output.LoadCurrentProof == LoadCurrentProof.ContactReadback && read.ContactProved == true)
        || Changes(set, read);

    /// <summary>
    /// Whether a loaded mean lies below the first unloaded one, towards the return, by more than the expanded
    /// uncertainty
    /// of the difference: a load that never came on is taken for one only once in two thousand.
    /// </summary>
    public static bool Changes(ReadingSet set, LoadPointReadings read)
    {
        PointMean unloaded = ReadingSet.Mean(set.Unloaded[0]);
        PointMean loaded = ReadingSet.Mean(read);
        double back = set.RailMean?.Volt ?? set.Job.LoadReturn?.VoltageVolt.Value ?? 0;
        ErrorDistribution error = DifferenceOf(set, unloaded, loaded);
        double change = (unloaded.Volt - loaded.Volt) * Math.Sign(unloaded.Volt - back);
        return change > 0
            && UpperTail.StudentTwoSided(change / error.StandardUncertainty, error.DegreesOfFreedom) < 1 - Probability;
    }

    /// <summary>Error of the difference of two means: noise and resolution; the offset cancels.</summary>
    public static ErrorDistribution DifferenceOf(ReadingSet set, PointMean one, PointMean other)
    {
        MeterRange range = set.Job.Range;
        double noise = range.NoiseVolt * Math.Sqrt((1.0 / one.Count) + (1.0 / other.Count));
        double resolution = range.ResolutionVolt / Math.Sqrt(6);
        return new(double.Hypot(noise, resolution), range.NoiseDegreesOfFreedom);
    }

    private static string Name(LoadPointReadings read) => read.Point.Load!.Name;

    private static string List(string[] names) => string.Join(", ", names);

    private static SourceFault Fault(string words) => new(SourceFaultKind.LoadNotProved, words, OfFixture: true);
}
