namespace ImpedanceScreen.Benchmarks.Programs;

/// <summary>Where the repository and its built programs lie.</summary>
internal static class Repository
{
    /// <summary>The folder of the solution.</summary>
    public static string Root { get; } = FindRoot();

    /// <summary>The station, built in the same configuration as this program.</summary>
    public static string Station { get; } = Path.Combine(
        Root, "src", "ImpedanceScreen.Station", "bin", new DirectoryInfo(AppContext.BaseDirectory).Parent!.Name, "net10.0",
        "ImpedanceScreen.Station.dll");

    /// <summary>A file of the repository.</summary>
    public static string File(params string[] parts) => Path.Combine([Root, .. parts]);

    private static string FindRoot()
    {
        DirectoryInfo? folder = new(AppContext.BaseDirectory);
        while (folder is not null && !System.IO.File.Exists(Path.Combine(folder.FullName, "ImpedanceScreen.sln")))
        {
            folder = folder.Parent;
        }

        return folder?.FullName ?? throw new InvalidOperationException("run it from within the repository");
    }
}
