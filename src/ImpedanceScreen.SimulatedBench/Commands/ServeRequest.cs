namespace ImpedanceScreen.SimulatedBench.Commands;

/// <summary>What the command line asks for.</summary>
internal sealed record ServeRequest(
    string FixturePath,
    string LimitsPath,
    string PopulationPath,
    ulong Seed,
    double TimeScale,
    long? Boards,
    string FirstSerial,
    string? TruthPath,
    string? LogPath,
    bool FreePorts,
    IReadOnlyDictionary<string, string> SerialDevices);
