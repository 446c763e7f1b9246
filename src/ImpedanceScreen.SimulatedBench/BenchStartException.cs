namespace ImpedanceScreen.SimulatedBench;

/// <summary>The simulated bench cannot start; the message says why and what to do, for a person.</summary>
/// <param name="message">Why.</param>
/// <param name="inner">What caused it.</param>
public sealed class BenchStartException(string message, Exception? inner = null) : Exception(message, inner);
