using ImpedanceScreen.Benchmarks.Programs;

namespace ImpedanceScreen.Tests.Station;

/// <summary>Commands that need no bench, by their exit codes and words.</summary>
[Collection(RealTime.Name)]
public sealed class StationCommandTests : IDisposable
{
    private readonly string folder = Directory.CreateTempSubdirectory("commands-").FullName;

    public void Dispose() => Directory.Delete(folder, recursive: true);

    [Fact]
    public async Task Shipped_files_are_good()
    {
        foreach (string fixture in new[] { "simulated-bench.yaml", "simulated-own-banks.yaml", "two-serial-ports.yaml" })
        {
            ProgramEnd end = await StationProgram.RunAsync(
                ["validate", "--fixture", $"fixtures/{fixture}", "--limits", "limits/tern-6.yaml"]);
            Assert.Equal((0, ""), (end.ExitCode, end.Errors));
            Assert.EndsWith(": good\n", end.Output, StringComparison.Ordinal);
        }
    }

    [Fact]
    public async Task Mistakes_are_listed_with_file_line_and_column()
    {
        string limits = Path.Combine(folder, "bad.yaml");
        string text = await File.ReadAllTextAsync(Repository.File("limits", "tern-6.yaml"));
        await File.WriteAllTextAsync(limits, text.Replace("serial_pattern:", "serial_patern:", StringComparison.Ordinal));
        int line = 1 + Array.FindIndex(
            text.Split('\n'), each => each.StartsWith("serial_pattern:", StringComparison.Ordinal));

        ProgramEnd listed = await StationProgram.RunAsync(["validate", "--limits", limits]);
        Assert.Equal(1, listed.ExitCode);
        Assert.StartsWith(
            $"{limits}:{line}:1: serial_patern: unknown key; did you mean `serial_pattern`?", listed.Output,
            StringComparison.Ordinal);

        ProgramEnd lot = await StationProgram.RunAsync(
            [
                "lot", "--fixture", "fixtures/simulated-bench.yaml", "--limits", limits, "--store",
                Path.Combine(folder, "none.db"), "--lot", "one", "--first-serial", "T6-000001", "--count", "1",
            ]);
        Assert.Equal(2, lot.ExitCode);
        Assert.Contains($"{limits}:{line}:1:", lot.Errors, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_calibration_that_has_run_out_is_told_of()
    {
        string fixture = Path.Combine(folder, "old.yaml");
        string text = await File.ReadAllTextAsync(Repository.File("fixtures", "simulated-bench.yaml"));
        int at = text.IndexOf("due_on: 2099-12-31", StringComparison.Ordinal);
        await File.WriteAllTextAsync(fixture, text.Remove(at, 18).Insert(at, "due_on: 2026-10-31"));

        ProgramEnd end = await StationProgram.RunAsync(["validate", "--fixture", fixture]);
        Assert.Equal(0, end.ExitCode);
        Assert.Contains(
            "the calibration of L22 (certificate HL-26-0417) was good until 2026-10-31", end.Errors,
            StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_missing_store_or_file_and_a_mistyped_option_begin_nothing()
    {
        ProgramEnd audit = await StationProgram.RunAsync(["audit", "--store", Path.Combine(folder, "none.db")]);
        Assert.Equal(2, audit.ExitCode);
        Assert.Contains("none.db", audit.Errors, StringComparison.Ordinal);
        Assert.False(File.Exists(Path.Combine(folder, "none.db")));

        ProgramEnd limits = await StationProgram.RunAsync(["validate", "--limits", Path.Combine(folder, "none.yaml")]);
        Assert.Equal(2, limits.ExitCode);
        Assert.Contains("none.yaml", limits.Errors, StringComparison.Ordinal);

        ProgramEnd option = await StationProgram.RunAsync(["audit", "--stor", "x"]);
        Assert.Equal(2, option.ExitCode);
    }

    [Fact]
    public async Task Settling_is_not_shortened_on_a_real_bench()
    {
        ProgramEnd end = await StationProgram.RunAsync(
            [
                "board", "T6-000001", "--fixture", "fixtures/two-serial-ports.yaml", "--limits", "limits/tern-6.yaml",
                "--store", Path.Combine(folder, "none.db"), "--time-scale", "0.5",
            ]);
        Assert.Equal(2, end.ExitCode);
        Assert.Contains("shortens settling", end.Errors, StringComparison.Ordinal);
    }

    [Fact]
    public async Task A_store_is_made_once()
    {
        string store = Path.Combine(folder, "records.db");
        Assert.Equal(0, (await StationProgram.RunAsync(["store-create", "--store", store, "--station", "one"])).ExitCode);
        ProgramEnd again = await StationProgram.RunAsync(["store-create", "--store", store, "--station", "one"]);
        Assert.Equal(2, again.ExitCode);
        ProgramEnd audit = await StationProgram.RunAsync(["audit", "--store", store]);
        Assert.Equal(0, audit.ExitCode);
        Assert.StartsWith("audit clean: 1 records, head 0:", audit.Output, StringComparison.Ordinal);
    }
}
