using System.Text.Json;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Station.Simulated;

/// <summary>Holds what was decided about simulated boards against the truth that their bench wrote down.</summary>
internal sealed class TruthCheck(string truthPath)
{
    private readonly Dictionary<string, Disposition> decided = new(StringComparer.Ordinal);

    public void Add(BoardRecord record)
    {
        if (record.Disposition != Disposition.Aborted)
        {
            decided[record.Serial] = record.Disposition;
        }
    }

    /// <summary>Bad boards that passed, and good boards that failed; retest is neither.</summary>
    public string Words()
    {
        int bad = 0;
        List<string> escapes = [];
        List<string> falseRejects = [];
        foreach ((string serial, bool isBad) in Truths())
        {
            bad += isBad ? 1 : 0;
            if (isBad && decided[serial] == Disposition.Pass)
            {
                escapes.Add(serial);
            }
            else if (!isBad && decided[serial] == Disposition.Fail)
            {
                falseRejects.Add(serial);
            }
        }

        return $"simulated truth: {bad} of {decided.Count} boards bad; "
            + $"escapes {List(escapes)}; false rejects {List(falseRejects)}";
    }

    private static string List(List<string> serials) =>
        serials.Count == 0 ? "0" : $"{serials.Count} ({string.Join(", ", serials)})";

    // The file is added to by each start of the bench: the last word about a serial number is the board screened now.
    private Dictionary<string, bool> Truths()
    {
        Dictionary<string, bool> truths = new(StringComparer.Ordinal);
        foreach (string line in File.ReadLines(truthPath))
        {
            using var truth = JsonDocument.Parse(line);
            string label = truth.RootElement.GetProperty("label").GetString()!;
            if (decided.ContainsKey(label))
            {
                truths[label] = truth.RootElement.GetProperty("bad").GetBoolean();
            }
        }

        return truths;
    }
}
