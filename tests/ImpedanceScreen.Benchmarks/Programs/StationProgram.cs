using System.Diagnostics;
using System.Globalization;

namespace ImpedanceScreen.Benchmarks.Programs;

/// <summary>What a program left behind.</summary>
/// <param name="ExitCode">Its exit code; 128 and the signal's number where a signal ended it.</param>
/// <param name="Output">Standard output.</param>
/// <param name="Errors">Standard error.</param>
internal sealed record ProgramEnd(int ExitCode, string Output, string Errors)
{
    /// <summary>The lines of standard output.</summary>
    public string[] Lines => Output.Split('\n', StringSplitOptions.RemoveEmptyEntries);
}

/// <summary>The station as a process of its own, as a person starts it.</summary>
internal sealed class StationProgram : IDisposable
{
    private static readonly TimeSpan Longest = TimeSpan.FromMinutes(2);

    private readonly Process process;

    private StationProgram(Process process, Task<ProgramEnd> ended)
    {
        this.process = process;
        Ended = ended;
    }

    /// <summary>Ends when the process has.</summary>
    public Task<ProgramEnd> Ended { get; }

    /// <summary>Starts it.</summary>
    /// <param name="arguments">Command and options.</param>
    /// <param name="folder">Working folder; the repository by default.</param>
    /// <param name="through">A program that runs it, with that program's arguments, as a tracer; none by
    /// default.</param>
    public static StationProgram Start(
        IEnumerable<string> arguments, string? folder = null, IReadOnlyList<string>? through = null)
    {
        string[] words = [.. through ?? [], "dotnet", Repository.Station, .. arguments];
        var start = new ProcessStartInfo(words[0], words[1..])
        {
            WorkingDirectory = folder ?? Repository.Root,
            RedirectStandardInput = true,
            RedirectStandardOutput = true,
            RedirectStandardError = true,
            UseShellExecute = false,
        };
        Process started = Process.Start(start) ?? throw new InvalidOperationException($"{words[0]} did not start");
        return new StationProgram(started, EndOf(started));
    }

    /// <summary>Runs it to its end.</summary>
    public static async Task<ProgramEnd> RunAsync(IEnumerable<string> arguments, string? folder = null)
    {
        using StationProgram program = Start(arguments, folder);
        program.CloseInput();
        return await program.Ended;
    }

    /// <summary>Waits for something at the bench that the running program brings about.</summary>
    /// <exception cref="InvalidOperationException">The program ended before.</exception>
    public async Task ReachesAsync(Task step)
    {
        if (await Task.WhenAny(step, Ended).WaitAsync(Longest) != step)
        {
            ProgramEnd end = await Ended;
            throw new InvalidOperationException($"the station ended with {end.ExitCode}: {end.Output}{end.Errors}");
        }
    }

    /// <summary>Types a line.</summary>
    public void Type(string line) => process.StandardInput.WriteLine(line);

    /// <summary>Closes standard input.</summary>
    public void CloseInput() => process.StandardInput.Close();

    /// <summary>Ends it as a power cut would: SIGKILL.</summary>
    public void Kill() => process.Kill();

    /// <summary>Sends a signal by name, as INT or TERM.</summary>
    public async Task SignalAsync(string name)
    {
        using Process kill = Process.Start(
            "kill", [$"-{name}", process.Id.ToString(CultureInfo.InvariantCulture)]);
        await kill.WaitForExitAsync();
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        if (!process.HasExited)
        {
            process.Kill();
        }

        process.Dispose();
    }

    private static async Task<ProgramEnd> EndOf(Process process)
    {
        Task<string> output = ReadAsync(process.StandardOutput);
        string errors = await ReadAsync(process.StandardError);
        string all = await output;
        await process.WaitForExitAsync();
        return new ProgramEnd(process.ExitCode, all, errors);
    }

    // A read of a pipe holds its thread however it is called: on threads of the pool, a bench in this process would
    // answer late.
    private static Task<string> ReadAsync(StreamReader reader) => Task.Factory.StartNew(
        reader.ReadToEnd, CancellationToken.None, TaskCreationOptions.LongRunning, TaskScheduler.Default);
}
