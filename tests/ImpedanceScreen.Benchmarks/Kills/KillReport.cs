namespace ImpedanceScreen.Benchmarks.Kills;

/// <summary>What came of killing the station again and again.</summary>
/// <param name="Kills">How often it was killed.</param>
/// <param name="AtHandshake">How many of these came right after a step of the handshake.</param>
/// <param name="Sorted">Boards that were told to leave.</param>
/// <param name="Records">Records in the store.</param>
/// <param name="Attempts">Attempts of these boards in the store, aborted ones included.</param>
/// <param name="Holds">How often a person had to read the board in the nest.</param>
/// <param name="Violations">What must never happen and did.</param>
internal sealed record KillReport(
    int Kills, int AtHandshake, int Sorted, long Records, int Attempts, int Holds, IReadOnlyList<string> Violations);
