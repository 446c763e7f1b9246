namespace ImpedanceScreen.Fixtures;

/// <summary>The supply that powers a board.</summary>
/// <param name="Relay">The relay that connects it.</param>
/// <param name="VoltageVolt">Its voltage, V.</param>
/// <param name="CurrentLimitAmpere">Its current limit, A.</param>
/// <param name="WarmUp">Time from power on to the first reading.</param>
/// <param name="OffBelowVolt">Every output lies below this magnitude before the board is unclamped, V.</param>
public sealed record BoardSupply(
    Relay Relay, double VoltageVolt, double CurrentLimitAmpere, TimeSpan WarmUp, double OffBelowVolt);
