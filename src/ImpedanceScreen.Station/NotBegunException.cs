namespace ImpedanceScreen.Station;

/// <summary>A command cannot begin; the message says why and what to do.</summary>
internal sealed class NotBegunException(string message, Exception? inner = null) : Exception(message, inner);
