namespace ImpedanceScreen.Tests;

/// <summary>
/// Tests that talk to a peer in real time, one after another and beside no arithmetic: a time-out of theirs must mean
/// that the peer was silent, not that this machine was busy.
/// </summary>
[CollectionDefinition(Name, DisableParallelization = true)]
public sealed class RealTime
{
    public const string Name = "real time";
}
