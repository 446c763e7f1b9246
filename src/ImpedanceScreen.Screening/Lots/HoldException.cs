namespace ImpedanceScreen.Screening.Lots;

/// <summary>The bench stops itself and waits for a person.</summary>
internal sealed class HoldException(string message) : Exception(message);
