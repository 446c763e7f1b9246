using System.CommandLine;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Station.Hosting;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>open-relays</c>: open every load, selector, sense, stimulus and supply relay from outside.</summary>
internal static class OpenRelaysCommand
{
    public static Command Make()
    {
        Option<string> fixture = FileOptions.Fixture();
        var command = new Command(
            "open-relays", "Open every relay of a fixture and prove it by reading back. Sort, busy and done stay as they are.")
        {
            fixture,
        };
        command.SetAction(parsed => RunAsync(parsed.GetRequiredValue(fixture)));
        return command;
    }

    private static async Task<int> RunAsync(string path)
    {
        FixtureFile fixture = JobFiles.LoadFixture(path);
        using FixtureLock held = FixtureLock.Take(fixture);
        await using var bench = new FixtureBench(
            fixture, new ChannelFactory(TimeProvider.System, NullLogger.Instance), TimeProvider.System, 1.0,
            NullLogger.Instance);
        AllOpenOutcome outcome = await bench.OpenAllAsync();
        if (outcome.Confirmed)
        {
            Console.WriteLine($"{fixture.Name}: all relays confirmed open");
            return ExitCode.Done;
        }

        await Console.Error.WriteLineAsync(
            $"{fixture.Name}: relays NOT proved open: {outcome.Alarm}. Switch the coil supply off by hand before you "
            + "touch the board.");
        return ExitCode.OnHold;
    }
}
