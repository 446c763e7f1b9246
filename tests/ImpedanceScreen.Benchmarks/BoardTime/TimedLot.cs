using System.Globalization;
using System.Text;
using System.Text.Json;
using ImpedanceScreen.Benchmarks.Programs;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Screening.Attempts;
using ImpedanceScreen.SimulatedBench.Logging;

namespace ImpedanceScreen.Benchmarks.BoardTime;

/// <summary>
/// A lot worked by the real station on the real simulated bench, each in its own process, in real time.
/// </summary>
internal static class TimedLot
{
    public static async Task<IReadOnlyList<BoardSpan>> RunAsync(
        string fixtureName, int count, ulong seed)
    {
        ScreeningJob job = Load(fixtureName);
        string folder = Directory.CreateTempSubdirectory("board-time-").FullName;
        try
        {
            string store = Path.Combine(folder, "records.db");
            string log = Path.Combine(folder, "bench.jsonl");
            await StationAsync("store-create", "--store", store, "--station", "board-time");
            string[] lines = await StationAsync(
                    "lot", "--simulated", "--json", "--population", "fixtures/tern-6-population.yaml", "--fixture",
                    $"fixtures/{fixtureName}", "--limits", "limits/tern-6.yaml", "--store", store, "--lot", "board-time",
                    "--first-serial", "T6-000001", "--count", count.ToString(CultureInfo.InvariantCulture), "--seed",
                    seed.ToString(CultureInfo.InvariantCulture), "--bench-log", log);
            BoardRecord[] records = [.. lines.Select(line => (BoardRecord)BodyCodec.Decode(Encoding.UTF8.GetBytes(line)))];
            return Spans(job, records, [.. File.ReadLines(log).Select(Event)]);
        }
        finally
        {
            Directory.Delete(folder, recursive: true);
        }
    }

    private static List<BoardSpan> Spans(ScreeningJob job, BoardRecord[] records, BenchEvent[] events)
    {
        Handshake handshake = job.Fixture.Handshake!;
        HashSet<(string, ushort)> sense =
        [
            .. job.Fixture.Outputs.Select(output => (output.Sense.Unit, output.Sense.Coil)),
            .. job.Fixture.LoadReturns.Select(rail => (rail.SenseRelay.Unit, rail.SenseRelay.Coil)),
        ];
        TimeSpan contact = BenchFloor.Contact(job);
        List<BoardSpan> spans = [];
        int begin = -1;
        for (int i = 0; i < events.Length; i++)
        {
            if (WentOn(events[i], handshake.Busy))
            {
                begin = i;
            }
            else if (WentOn(events[i], handshake.Done) && begin >= 0)
            {
                BenchEvent[] within = events[begin..i];
                spans.Add(new BoardSpan(
                    TimeSpan.FromMilliseconds(events[i].Ms - events[begin].Ms),
                    BenchFloor.Waits(records[spans.Count], job, 1),
                    TimeSpan.FromMilliseconds(within.OfType<ReadingTaken>().Sum(each => each.IntegrationMs + each.TurnaroundMs)),
                    TimeSpan.FromMilliseconds(within.OfType<LineUsed>().Sum(each => (each.BytesIn + each.BytesOut) * each.CharacterMs)),
                    contact * within.OfType<CoilChanged>().Count(each => each.On && sense.Contains((each.Unit, each.Coil)))));
                begin = -1;
            }
        }

        return spans.Count == records.Length
            ? spans
            : throw new InvalidOperationException($"{records.Length} records but {spans.Count} boards at the bench");
    }

    private static bool WentOn(BenchEvent happened, Relay relay) =>
        happened is CoilChanged { On: true } coil && coil.Unit == relay.Unit && coil.Coil == relay.Coil;

    private static BenchEvent Event(string line) =>
        JsonSerializer.Deserialize<BenchEvent>(line, BenchLog.Json) ?? throw new JsonException("empty line");

    private static ScreeningJob Load(string fixtureName) =>
        JobBinder.Bind(
            LimitFileBinder.Bind(Text("limits/tern-6.yaml")).Value,
            FixtureFileBinder.Bind(Text($"fixtures/{fixtureName}")).Value).Value;

    private static FileText Text(string name) => new(name, File.ReadAllText(Repository.File(name)));

    private static async Task<string[]> StationAsync(params string[] arguments)
    {
        ProgramEnd end = await StationProgram.RunAsync(arguments);
        return end.ExitCode == 0
            ? end.Lines
            : throw new InvalidOperationException($"the station ended with {end.ExitCode}: {end.Output}{end.Errors}");
    }
}
