using ImpedanceScreen.Files;

namespace ImpedanceScreen.Tests.Files;

/// <summary>The files that come with the program, as copied beside the tests.</summary>
internal static class ShippedFiles
{
    internal const string Limits = "limits/tern-6.yaml";
    internal const string SimulatedBench = "fixtures/simulated-bench.yaml";
    internal const string TwoSerialPorts = "fixtures/two-serial-ports.yaml";

    internal static string PathOf(string name) => Path.Combine(AppContext.BaseDirectory, name);

    internal static FileText Read(string name) => new(name, File.ReadAllText(PathOf(name)));
}
