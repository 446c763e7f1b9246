namespace ImpedanceScreen.SimulatedBench.Commands;

/// <summary>What a hand does at the bench, told line by line on standard input.</summary>
internal static class ControlLines
{
    /// <summary>Follows the lines until there are no more.</summary>
    public static Task FollowAsync(SimulatedBenchHost host, TextReader lines, TextWriter complaints) =>
        // The console's reader blocks whatever it is asked; a thread of its own keeps the servers free.
        Task.Factory.StartNew(
            () =>
            {
                while (lines.ReadLine() is { } line)
                {
                    if (!Carry(host, line.Trim()))
                    {
                        complaints.WriteLine($"not understood: {line}; say interlock open, interlock close, lift or next");
                    }
                }
            },
            CancellationToken.None, TaskCreationOptions.LongRunning, TaskScheduler.Default);

    private static bool Carry(SimulatedBenchHost host, string line)
    {
        switch (line)
        {
            case "":
                return true;
            case "interlock open":
                host.OpenInterlock();
                return true;
            case "interlock close":
                host.CloseInterlock();
                return true;
            case "lift":
                host.Lift();
                return true;
            case "next":
                host.Replace();
                return true;
            default:
                return false;
        }
    }
}
