using System.Text.Json;
using ImpedanceScreen.Limits;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.SimulatedBench.Logging;

/// <summary>Writes the truth about each board beside the records, so that escapes and false rejects can be
/// counted.</summary>
/// <param name="limits">The limits that make a board bad.</param>
/// <param name="writer">Where the JSON lines go.</param>
public sealed class TruthFile(LimitFile limits, TextWriter writer)
{
    /// <summary>Writes one board.</summary>
    public void Add(SimulatedBoard board)
    {
        ArgumentNullException.ThrowIfNull(board);
        BoardTruth truth = Judge(board, limits);
        writer.WriteLine(JsonSerializer.Serialize(truth, BenchLog.Json));
        writer.Flush();
    }

    /// <summary>
    /// The truth about a board: bad is a true quantity beyond its limit, or a named fault that is present.
    /// </summary>
    public static BoardTruth Judge(SimulatedBoard board, LimitFile limits)
    {
        ArgumentNullException.ThrowIfNull(board);
        ArgumentNullException.ThrowIfNull(limits);
        List<SourceTruth> sources = [];
        foreach (OutputLimits output in limits.Outputs)
        {
            foreach (DriveState state in output.States)
            {
                TrueSource source = board.Source(output.Name, state.Name);
                NominalSource truth = new(source.VoltageVolt, source.ResistanceOhm);
                bool isBad = source.Defect is not null || !state.Limits.All(limit => limit.Holds(limit.Of(truth)));
                sources.Add(new SourceTruth(
                    output.Name, state.Name, source.VoltageVolt, source.ResistanceOhm, source.CurrentLimitAmpere,
                    source.NoiseVolt, DefectNames.Of(source.Defect), isBad));
            }
        }

        return new BoardTruth(board.Ordinal, board.Label, sources.Any(source => source.Bad), sources);
    }
}

/// <summary>The truth about a board.</summary>
/// <param name="Ordinal">Its number, from 1.</param>
/// <param name="Label">Its serial number.</param>
/// <param name="Bad">Whether any output is bad.</param>
/// <param name="Sources">Every output and drive state.</param>
public sealed record BoardTruth(long Ordinal, string Label, bool Bad, IReadOnlyList<SourceTruth> Sources);

/// <summary>The truth about one output in one drive state.</summary>
/// <param name="Output">Output name.</param>
/// <param name="State">Drive state name.</param>
/// <param name="SourceVoltageV">True source voltage, V.</param>
/// <param name="InternalResistanceOhm">True internal resistance, Ω.</param>
/// <param name="CurrentLimitA">Knee of its current limit, A; null where it does not limit.</param>
/// <param name="NoiseV">Its own scatter, V.</param>
/// <param name="Defect">Name of its defect, or <c>none</c>.</param>
/// <param name="Bad">Whether a true quantity is beyond its limit or a named fault is present.</param>
public sealed record SourceTruth(
    string Output, string State, double SourceVoltageV, double InternalResistanceOhm, double? CurrentLimitA,
    double NoiseV, string Defect, bool Bad);
