using System.Text.RegularExpressions;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Attempts;
using ImpedanceScreen.Screening.Handshakes;
using ImpedanceScreen.Screening.Status;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Screening.Lots;

/// <summary>
/// The bench loop: the only caller of the bench. Starts it safe, puts the unfinished of an earlier process in order,
/// then screens board after
/// board until the serial numbers end or something says stop.
/// </summary>
public sealed class LotRunner
{
    private const int AbortedInARowMax = 3;

    // After a stop; a handler needs less, and a service manager's own limit lies above.
    private static readonly TimeSpan LeavingLimit = TimeSpan.FromSeconds(5);

    private readonly IBench bench;
    private readonly IRecordStore store;
    private readonly StatusBoard status;
    private readonly LotOrder order;
    private readonly RunSettings run;
    private readonly ILogger log;
    private readonly HandlerDialogue handler;
    private readonly Regex serialPattern;
    private readonly List<Guid> superseded = [];
    private BenchSettings settings;
    private int faultsInARow;
    private int screened;
    private bool sortedBoardInNest;

    /// <summary>Makes the loop; nothing is touched before <see cref="RunAsync"/>.</summary>
    public LotRunner(
        IBench bench, IRecordStore store, StatusBoard status, LotOrder order, RunSettings run, ILogger<LotRunner> log)
    {
        ArgumentNullException.ThrowIfNull(order);
        ArgumentNullException.ThrowIfNull(store);
        ArgumentNullException.ThrowIfNull(run);
        this.bench = bench;
        this.store = store;
        this.status = status;
        this.order = order;
        this.run = run;
        this.log = log;
        serialPattern = SerialNumber.Compile(order.Job.Limits.SerialPattern);
        handler = new HandlerDialogue(bench, order.Job.Fixture, run.Time);
        settings = new BenchSettings(
            store.Station, run.ProgramVersion, new Dictionary<string, string>(), run.TimeScale, run.Time,
            run.Arithmetic);
    }

    /// <summary>Works the lot off. However it ends, all relays were told to open.</summary>
    public async Task<LotEnd> RunAsync(CancellationToken cancellation)
    {
        DateTimeOffset startedAt = run.Time.GetUtcNow();
        status.PublishLot(order.Lot, order.Serials.Count);
        LotEnd end;
        try
        {
            await WorkAsync(startedAt, cancellation);
            end = new LotEnd(LotEndKind.Complete, "", store.Head);
        }
        catch (OperationCanceledException) when (cancellation.IsCancellationRequested)
        {
            end = new LotEnd(LotEndKind.Stopped, "told to stop", store.Head);
        }
        catch (StoreFaultException e)
        {
            end = new LotEnd(LotEndKind.StoreFault, e.Message, store.Head);
        }
        catch (HoldException e)
        {
            end = await HoldAsync(e.Message);
        }
        catch (BenchFaultException e)
        {
            end = await HoldAsync(e.Message);
        }
        catch
        {
            // A defect of this program: nothing is known any more, so the bench is left safe before it is told.
            await bench.OpenAllAsync();
            throw;
        }

        AllOpenOutcome allOpen = await bench.OpenAllAsync();
        if (!allOpen.Confirmed && end.Kind != LotEndKind.OnHold)
        {
            end = await HoldAsync(NotProvedOpen(allOpen).Message);
        }

        status.Publish(end.Kind == LotEndKind.Complete ? Activity.Ended : Activity.OnHold, end.Words);
        return end;
    }

    private async Task WorkAsync(DateTimeOffset startedAt, CancellationToken cancellation)
    {
        BenchStart start = await StartBenchAsync(cancellation);
        await store.KeepTextAsync(order.Job.Limits.Source);
        await store.KeepTextAsync(order.Job.Fixture.Source);
        string? again = await RecoverAsync(start.Handshake, startedAt, cancellation);
        while (await NextSerialAsync(again, cancellation) is { } serial)
        {
            again = null;
            await ScreenAsync(serial, cancellation);
        }

        // Starting a finished lot once more screens nothing and closes nothing.
        if (order is { Lot: { } lot, ClosesLot: true } && screened > 0)
        {
            LotCounts counts = await store.CountLotAsync(lot);
            await store.AppendAsync(new LotCloseRecord(
                lot, order.Job.Limits.Product, order.Operator, startedAt, run.Time.GetUtcNow(), counts.Boards,
                counts.Passed, counts.Failed, counts.Retest, counts.Aborted, run.ProgramVersion));
            await store.CheckpointAsync();
        }
    }

    private async Task<BenchStart> StartBenchAsync(CancellationToken cancellation)
    {
        status.Publish(Activity.Starting, "opening all relays, then identifying meters");
        BenchStart start = await bench.StartAsync(cancellation);
        if (!start.AllOpen.Confirmed)
        {
            throw NotProvedOpen(start.AllOpen);
        }

        settings = settings with { Meters = start.Meters };
        log.LogInformation("bench {Fixture} started: all relays open, meters {Meters}", order.Job.Fixture.Name, start.Meters);
        return start;
    }

    /// <summary>
    /// Attempts of an earlier process without a record get one; says which serial number to screen first.
    /// </summary>
    private async Task<string?> RecoverAsync(
        HandshakeState? found, DateTimeOffset now, CancellationToken cancellation)
    {
        IReadOnlyList<UnfinishedAttempt> unfinished = await store.UnfinishedAttemptsAsync(order.Job.Fixture.Name);
        foreach (UnfinishedAttempt lost in unfinished.Where(attempt => attempt.Recorded is null))
        {
            IReadOnlyList<RecordedAttempt> before = await store.AttemptsAsync(lost.Start.Product, lost.Start.Serial);
            await store.AppendAsync(AbortedRecord.Of(lost.Start, before, order.Job, settings, now));
            log.LogWarning("attempt at {Serial} of an earlier start had no record: recorded as aborted", lost.Start.Serial);
        }

        superseded.AddRange(unfinished.Select(attempt => attempt.Start.AttemptId));
        bool present = order.Job.Fixture.Inputs.BoardPresent is not null
            && (await bench.PollInputsAsync(cancellation)).BoardPresent;
        var finding = RestartFinding.Of(found, present, unfinished.Count > 0 ? unfinished[^1] : null);
        if (finding is RestartFinding.Sorted)
        {
            status.Publish(Activity.Sorting, "waiting for the board sorted before to leave");
            await handler.AwaitNoBoardAsync(cancellation);
            await FinishAsync();
        }

        if (found is { } coils && (finding is RestartFinding.Sorted || !present) && (coils.Busy || coils.Done))
        {
            await handler.EndAsync(cancellation);
        }

        log.LogInformation("restart: {Finding}", finding);
        return FirstSerial(finding);
    }

    private string? FirstSerial(RestartFinding finding) => finding switch
    {
        _ when order.BoardInNest is { } named => named,
        _ when order.Serials.ReadsTheBoard => null,
        RestartFinding.ScreenAgain again => again.Serial,
        RestartFinding.Unknown unknown => throw new HoldException(
            $"a board lies in the nest and it cannot be told whether it is {unknown.Serial}, whose record exists, or "
            + "the next one: read its serial number and start again naming it, or take it out"),
        _ => null,
    };

    private async Task<string?> NextSerialAsync(string? again, CancellationToken cancellation)
    {
        if (again is not null)
        {
            return again;
        }

        status.Publish(Activity.AwaitingSerial, "waiting for a serial number");
        while (await order.Serials.NextAsync(cancellation) is { } serial)
        {
            if (!serialPattern.IsMatch(serial))
            {
                log.LogWarning(
                    "{Serial} is no serial number of {Product} (pattern {Pattern}): scan it again",
                    serial, order.Job.Limits.Product, order.Job.Limits.SerialPattern);
            }
            else if (order.Serials.ReadsTheBoard || !await HasResultAsync(store, order.Job.Limits.Product, serial, order.Lot))
            {
                return serial;
            }
        }

        return null;
    }

    /// <summary>Whether a serial number has a record in a lot that is not an aborted attempt.</summary>
    public static async Task<bool> HasResultAsync(IRecordStore store, string product, string serial, string? lot)
    {
        ArgumentNullException.ThrowIfNull(store);
        return lot is not null
            && (await store.AttemptsAsync(product, serial))
                .Any(attempt => attempt.Lot == lot && attempt.Disposition != Disposition.Aborted);
    }

    private async Task ScreenAsync(string serial, CancellationToken cancellation)
    {
        for (int aborted = 0; aborted < AbortedInARowMax; aborted++)
        {
            if (sortedBoardInNest)
            {
                status.Publish(Activity.AwaitingBoard, "waiting for the board before to be taken out", serial);
                await handler.AwaitNoBoardAsync(cancellation);
                await FinishAsync();
                sortedBoardInNest = false;
            }

            status.Publish(Activity.AwaitingBoard, "waiting for the board and a closed guard", serial);
            await handler.AwaitBoardAsync(cancellation);
            await handler.BeginAsync(cancellation);
            AttemptEnd end = await AttemptAsync(serial, cancellation);
            if (end.Interruption is null && end.AllOpen.Confirmed)
            {
                faultsInARow = 0;
                await SortAsync(end.Record, cancellation);
                return;
            }

            status.Count(end.Record);
            log.LogWarning("attempt at {Serial} aborted: {Cause}", serial, end.Record.Cause);
            await MakeReadyAgainAsync(end, cancellation);
        }

        throw new HoldException($"{AbortedInARowMax} attempts at {serial} were aborted one after another");
    }

    private async Task<AttemptEnd> AttemptAsync(string serial, CancellationToken cancellation)
    {
        IReadOnlyList<RecordedAttempt> before = await store.AttemptsAsync(order.Job.Limits.Product, serial);
        var attempt = new AttemptOrder(
            Guid.CreateVersion7(run.Time.GetUtcNow()),
            order.Job,
            serial,
            before.Count + 1,
            before.Count > 0 ? before[^1].AttemptId : null,
            before.Any(earlier => earlier.Disposition == Disposition.Fail),
            order.Lot,
            order.Operator,
            run.Time.GetUtcNow());
        await store.BeginAttemptAsync(new AttemptStart(
            attempt.AttemptId, order.Job.Limits.Product, serial, order.Lot, order.Job.Fixture.Name, attempt.StartedAt));

        // From here a new attempt stands for the board in the nest; those before it need no answer any more.
        await FinishAsync();
        superseded.Add(attempt.AttemptId);
        AttemptEnd end = await new BoardAttempt(bench, attempt, settings, status).RunAsync(cancellation);
        status.Publish(Activity.Recording, "making the record durable", serial, 1);
        await store.AppendAsync(end.Record);
        return end;
    }

    /// <summary>
    /// Only reached when the record of the attempt is durable. A stop lets the sorted board leave first: otherwise
    /// nobody could say at the next start which board lies in the nest.
    /// </summary>
    private async Task SortAsync(BoardRecord record, CancellationToken stop)
    {
        using var leaving = new CancellationTokenSource();
        await using ITimer limit = run.Time.CreateTimer(
            _ => leaving.Cancel(), null, Timeout.InfiniteTimeSpan, Timeout.InfiniteTimeSpan);
        await using CancellationTokenRegistration stopped =
            stop.Register(() => limit.Change(LeavingLimit, Timeout.InfiniteTimeSpan));
        CancellationToken cancellation = leaving.Token;
        status.Publish(Activity.Sorting, $"board goes to {record.Disposition}", record.Serial, 1);
        await handler.SortAsync(record.Disposition, cancellation);

        // Shown while the handler moves: the nest does not wait for a terminal.
        status.Count(record);
        screened++;
        if (order.Job.Fixture.Handshake is null)
        {
            // A person takes it out, in their own time; the next serial number must not be given to it.
            sortedBoardInNest = true;
            return;
        }

        await handler.AwaitNoBoardAsync(cancellation);

        await FinishAsync();
        await handler.EndAsync(cancellation);
        stop.ThrowIfCancellationRequested();
    }

    private async Task MakeReadyAgainAsync(AttemptEnd end, CancellationToken cancellation)
    {
        cancellation.ThrowIfCancellationRequested();
        if (!end.AllOpen.Confirmed)
        {
            throw NotProvedOpen(end.AllOpen);
        }

        if (end.Interruption is BenchFaultException fault)
        {
            if (++faultsInARow > 1)
            {
                throw new HoldException(fault.Message);
            }

            await StartBenchAsync(cancellation);
        }
    }

    private static HoldException NotProvedOpen(AllOpenOutcome outcome) =>
        new($"relays not proved open: {outcome.Alarm} Switch the coil supply off by hand before you touch the board.");

    private async Task FinishAsync()
    {
        foreach (Guid attempt in superseded)
        {
            await store.FinishAttemptAsync(attempt);
        }

        superseded.Clear();
    }

    private async Task<LotEnd> HoldAsync(string reason)
    {
        log.LogError("on hold: {Reason}", reason);
        try
        {
            ChainHead head = await store.AppendAsync(
                new HoldRecord(order.Lot, run.Time.GetUtcNow(), reason, run.ProgramVersion));
            return new LotEnd(LotEndKind.OnHold, reason, head);
        }
        catch (StoreFaultException e)
        {
            return new LotEnd(LotEndKind.StoreFault, $"{reason}; and the hold could not be recorded: {e.Message}", store.Head);
        }
    }
}
