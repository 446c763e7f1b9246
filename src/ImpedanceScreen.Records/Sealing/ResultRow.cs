using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>The narrow row of one output in one drive state: what questions over many boards are asked of.</summary>
/// <param name="Output">Output name.</param>
/// <param name="State">Drive state name.</param>
/// <param name="SourceVoltageVolt">Vth, V; null without an estimate.</param>
/// <param name="SourceVoltageUncertaintyVolt">u(Vth), V.</param>
/// <param name="InternalResistanceOhm">Rth, Ω.</param>
/// <param name="InternalResistanceUncertaintyOhm">u(Rth), Ω.</param>
/// <param name="Correlation">Their correlation.</param>
/// <param name="Droop">Droop at the rated load, a fraction; null where no limit asks for it.</param>
/// <param name="Decision">The decision in its word.</param>
/// <param name="Fault">The named fault in its word; null where there is none.</param>
internal sealed record ResultRow(
    string Output,
    string State,
    double? SourceVoltageVolt,
    double? SourceVoltageUncertaintyVolt,
    double? InternalResistanceOhm,
    double? InternalResistanceUncertaintyOhm,
    double? Correlation,
    double? Droop,
    string Decision,
    string? Fault)
{
    public static IReadOnlyList<ResultRow> AllOf(Record record) =>
        record is BoardRecord board ? [.. board.States.Select(Of)] : [];

    private static ResultRow Of(StateResult state)
    {
        LimitDecision? droop = state.Decisions.FirstOrDefault(decision => decision.Quantity == Quantity.Droop);
        return new ResultRow(
            state.Output,
            state.State,
            Known(state.Estimate?.SourceVoltageVolt),
            Known(state.Estimate?.SourceVoltageUncertaintyVolt),
            Known(state.Estimate?.InternalResistanceOhm),
            Known(state.Estimate?.InternalResistanceUncertaintyOhm),
            Known(state.Estimate?.Correlation),
            Known(droop?.Value),
            Words<Decision>.Of(state.Decision),
            state.Fault is { } fault ? Words<SourceFaultKind>.Of(fault.Kind) : null);
    }

    private static double? Known(double? value) => value is { } number && !double.IsNaN(number) ? number : null;
}
