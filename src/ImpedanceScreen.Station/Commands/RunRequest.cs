namespace ImpedanceScreen.Station.Commands;

/// <summary>What a person asked for on the command line of a screening command.</summary>
internal sealed record RunRequest(
    string FixturePath,
    string LimitsPath,
    string StorePath,
    string? Lot,
    string? Operator,
    bool Json,
    string? LogFolder,
    SimulationRequest? Simulation,
    double TimeScale)
{
    /// <summary>Where a simulated bench writes the truth about its boards: beside the records.</summary>
    public string TruthPath => StorePath + ".truth.jsonl";
}

/// <summary>How the simulated bench is to be.</summary>
internal sealed record SimulationRequest(string PopulationPath, ulong Seed, string? BenchLogPath);
