using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Planning;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// Whether load current is proved at each load point: by the mirror contact where the fixture declares it, else by a
/// change from the unloaded reading beyond its expanded uncertainty.
/// </summary>
internal static class LoadCurrentTest
{
    /// <summary>Finds what is not proved; null where all is.</summary>
    public static SourceFault? Find(ReadingSet set)
    {
        string[] open = [.. set.Loaded.Where(read => read.ContactProved == false).Select(Name)];
        if (open.Length > 0)
        {
            return Fault($"load relay {List(open)} did not close: its contact reads open; look at relay and coil wiring");
        }

        if (set.Unloaded.Length == 0)
        {
            return null;
        }

        string[] silent = [.. set.Loaded.Where(read => !IsProved(set, read)).Select(Name)];
        if (silent.Length == 0)
        {
            return null;
        }

        return silent.Length == set.Loaded.Length && silent.Length > 1
            ? Fault("no load changes the reading: selector relay did not close, or the path to the loads or their return "
                + "is open; look at selector relay, fixture contacts and the output's joint")
            : Fault($"load relay {List(silent)} did not close or joint open: no change from unloaded");
    }

    private static bool IsProved(ReadingSet set, LoadPointReadings read)
    {
        if (set.Job.Output.LoadCurrentProof == LoadCurrentProof.ContactReadback && read.ContactProved == true)
        {
            return true;
        }

        PointMean unloaded = ReadingSet.Mean(set.Unloaded[0]);
        PointMean loaded = ReadingSet.Mean(read);
        ErrorDistribution error = DifferenceOf(set, unloaded, loaded);
        double expanded = error.StandardUncertainty * error.CoverageFactor(0.95);
        return Math.Abs(loaded.Volt - unloaded.Volt) > expanded;
    }

    /// <summary>Error of the difference of two means: noise and resolution; the offset cancels.</summary>
    public static ErrorDistribution DifferenceOf(ReadingSet set, PointMean one, PointMean other)
    {
        MeterRange range = set.Job.Range;
        double noise = range.NoiseVolt * Math.Sqrt((1.0 / one.Count) + (1.0 / other.Count));
        double resolution = range.ResolutionVolt / Math.Sqrt(6);
        return new(double.Hypot(noise, resolution), range.NoiseDegreesOfFreedom, 0);
    }

    private static string Name(LoadPointReadings read) => read.Point.Load!.Name;

    private static string List(string[] names) => string.Join(", ", names);

    private static SourceFault Fault(string words) => new(SourceFaultKind.LoadNotProved, words, OfFixture: true);
}
