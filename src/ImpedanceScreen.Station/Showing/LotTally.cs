using ImpedanceScreen.Decisions;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Attempts;
using ImpedanceScreen.Station.Simulated;

namespace ImpedanceScreen.Station.Showing;

/// <summary>Counts of a run: small whatever the number of boards, but for eight bytes a board of times.</summary>
internal sealed class LotTally(ScreeningJob job, double timeScale, TruthCheck? truth)
{
    private readonly Dictionary<(string Place, string Cause), int> causes = [];
    private readonly List<float> seconds = [];
    private readonly List<float> overFloor = [];

    public int Passed { get; private set; }

    public int Failed { get; private set; }

    public int Retest { get; private set; }

    public int Aborted { get; private set; }

    public int Screened => Passed + Failed + Retest;

    /// <summary>Median time of a board, s; NaN before the first.</summary>
    public double MedianSeconds => Median(seconds);

    /// <summary>Median ratio of a board's time to its bench floor; NaN before the first.</summary>
    public double MedianOverFloor => Median(overFloor);

    /// <summary>Output, drive state and cause of what did not pass, the most frequent first.</summary>
    public IEnumerable<(string Place, string Cause, int Boards)> Causes =>
        causes.Select(each => (each.Key.Place, each.Key.Cause, each.Value))
            .OrderByDescending(each => each.Value)
            .ThenBy(each => each.Place, StringComparer.Ordinal)
            .ThenBy(each => each.Cause, StringComparer.Ordinal);

    /// <summary>Decisions against the truth; null on a real bench.</summary>
    public string? Truth => truth?.Words();

    public void Add(BoardRecord record)
    {
        truth?.Add(record);
        _ = record.Disposition switch
        {
            Disposition.Pass => Passed++,
            Disposition.Fail => Failed++,
            Disposition.Retest => Retest++,
            _ => Aborted++,
        };
        if (record.Disposition == Disposition.Aborted)
        {
            return;
        }

        foreach (StateResult state in record.States.Where(state => state.Decision != Decision.Pass))
        {
            foreach (string cause in CausesOf(state))
            {
                (string, string) key = ($"{state.Output} {state.State}", cause);
                causes[key] = causes.GetValueOrDefault(key) + 1;
            }
        }

        TimeSpent spent = record.TimeSpent;
        double took = (spent.SwitchingMs + spent.SettlingMs + spent.IntegratingMs + spent.TalkingMs + spent.OtherMs) / 1e3;
        seconds.Add((float)took);
        TimeSpan floor = BenchFloor.Waits(record, job, timeScale) + BenchFloor.Integration(record, job, timeScale);
        overFloor.Add((float)(took / floor.TotalSeconds));
    }

    private static IEnumerable<string> CausesOf(StateResult state) =>
        state.Fault is { } fault
            ? [FaultNames.Of(fault.Kind)]
            : state.Decisions.Where(limit => limit.Decision != Decision.Pass).Select(limit =>
                $"{QuantityText.Name(limit)} {(limit.Decision == Decision.Fail ? "outside its limit" : "undecided")}");

    private static double Median(List<float> values)
    {
        if (values.Count == 0)
        {
            return double.NaN;
        }

        float[] sorted = [.. values.Order()];
        return (sorted[(sorted.Length - 1) / 2] + sorted[sorted.Length / 2]) / 2.0;
    }
}
