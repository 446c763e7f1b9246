using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.SimulatedBench.Commands;

/// <summary>Reads and makes the files that a request names.</summary>
internal static class BenchFiles
{
    /// <exception cref="BenchStartException">A file is missing or holds mistakes; all of them are listed.</exception>
    public static SimulatedBenchOptions Load(ServeRequest request)
    {
        LimitFile limits = Good(LimitFileBinder.Bind(Read(request.LimitsPath)));
        FixtureFile fixture = Good(FixtureFileBinder.Bind(Read(request.FixturePath)));
        Population population = Good(PopulationFileBinder.Bind(Read(request.PopulationPath), limits));
        return new SimulatedBenchOptions(Good(JobBinder.Bind(limits, fixture)), population, request.Seed)
        {
            TimeScale = request.TimeScale,
            Boards = request.Boards,
            FirstSerial = request.FirstSerial,
            Listening = request.FreePorts ? Listening.OnFreePorts : Listening.AsDeclared,
            SerialDevices = request.SerialDevices,
        };
    }

    /// <summary>Makes a file to write; null where none is wanted.</summary>
    /// <exception cref="BenchStartException">It cannot be made.</exception>
    public static TextWriter? Create(string? path) => path is null ? null : Reach(path, () =>
        new StreamWriter(new FileStream(path, FileMode.Append, FileAccess.Write, FileShare.ReadWrite)));

    private static FileText Read(string path) => new(path, Reach(path, () => File.ReadAllText(path)));

    private static T Reach<T>(string path, Func<T> open)
    {
        try
        {
            return open();
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException)
        {
            throw new BenchStartException($"{path}: {e.Message}", e);
        }
    }

    private static T Good<T>(Checked<T> read)
        where T : class =>
        read.TryGet(out T? value)
            ? value
            : throw new BenchStartException(string.Join(Environment.NewLine, read.Mistakes));
}
