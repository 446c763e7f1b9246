using System.Diagnostics;
using System.Net.Sockets;
using System.Text;
using System.Text.Json;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The simulated bench as a program of its own.</summary>
[Collection(RealTime.Name)]
public sealed class ExecutableTests
{
    private static readonly string Program = Path.Combine(AppContext.BaseDirectory, "ImpedanceScreen.SimulatedBench.dll");

    [Fact]
    public async Task It_prints_its_addresses_serves_follows_control_lines_and_ends_with_its_input()
    {
        string folder = Directory.CreateTempSubdirectory("simulated-bench-").FullName;
        string log = Path.Combine(folder, "log.jsonl");
        string truth = Path.Combine(folder, "truth.jsonl");
        using Process bench = Peers.Start("dotnet", [.. Arguments(), "--log", log, "--truth", truth, "--boards", "2"]);
        var addresses = JsonSerializer.Deserialize<Dictionary<string, string>>(
            (await bench.StandardOutput.ReadLineAsync())!)!;
        Assert.Equal(["meter-line", "relay-line"], addresses.Keys.Order());
        Assert.Equal(Tern6.Fixture.Meters[0].Identity, await IdentityAsync(addresses["meter-line"]));

        await AwaitAsync(log, "\"label\":\"T6-000101\"");
        await bench.StandardInput.WriteLineAsync("interlock open");
        await AwaitAsync(log, "\"input\":\"interlock\",\"on\":false");
        await bench.StandardInput.WriteLineAsync("lift");
        await AwaitAsync(log, "\"label\":\"T6-000102\"");
        bench.StandardInput.Close();
        await bench.WaitForExitAsync();
        Assert.Equal(0, bench.ExitCode);
        Assert.Equal("", await bench.StandardOutput.ReadToEndAsync());
        Assert.Equal("", await bench.StandardError.ReadToEndAsync());
        Assert.Equal(2, (await File.ReadAllLinesAsync(truth)).Length);
        Directory.Delete(folder, recursive: true);
    }

    [Fact]
    public async Task It_ends_cleanly_when_it_is_told_to_terminate()
    {
        using Process bench = Peers.Start("dotnet", Arguments());
        Assert.NotNull(await bench.StandardOutput.ReadLineAsync());
        using Process kill = Peers.Start("kill", "-TERM", $"{bench.Id}");
        await bench.WaitForExitAsync();
        Assert.Equal(0, bench.ExitCode);
    }

    [Fact]
    public async Task A_file_with_mistakes_is_refused_with_their_places()
    {
        using Process bench = Peers.Start("dotnet", [.. Arguments(), "--limits", Tern6.FixturePath]);
        string errors = await bench.StandardError.ReadToEndAsync();
        await bench.WaitForExitAsync();
        Assert.NotEqual(0, bench.ExitCode);
        Assert.NotEqual("", errors);
        using Process mixed = Peers.Start(
            "dotnet", Program, "--fixture", Tern6.FixturePath, "--limits", Tern6.FixturePath, "--population",
            Tern6.PopulationPath);
        Assert.Contains("simulated-bench.yaml:3:1: kind", await mixed.StandardError.ReadToEndAsync(), StringComparison.Ordinal);
        await mixed.WaitForExitAsync();
        Assert.Equal(2, mixed.ExitCode);
    }

    private static string[] Arguments() =>
    [
        Program, "--fixture", Tern6.FixturePath, "--limits", Tern6.LimitsPath, "--population", Tern6.PopulationPath,
        "--seed", "6", "--time-scale", "0.1", "--first-serial", "T6-000101", "--free-ports",
    ];

    private static async Task<string> IdentityAsync(string address)
    {
        string[] parts = address.Split(':');
        using TcpClient client = new(parts[0], int.Parse(parts[1], System.Globalization.CultureInfo.InvariantCulture));
        await client.GetStream().WriteAsync("*IDN?\n"u8.ToArray());
        using StreamReader reader = new(client.GetStream(), Encoding.ASCII);
        return (await reader.ReadLineAsync())!;
    }

    private static async Task AwaitAsync(string path, string text)
    {
        DateTime limit = DateTime.UtcNow.AddSeconds(20);
        string found;
        do
        {
            await Task.Delay(10);
            await using FileStream file = new(path, FileMode.Open, FileAccess.Read, FileShare.ReadWrite);
            using StreamReader reader = new(file);
            found = await reader.ReadToEndAsync();
            Assert.True(DateTime.UtcNow < limit, $"no {text} in: {found}");
        }
        while (!found.Contains(text, StringComparison.Ordinal));
    }
}
