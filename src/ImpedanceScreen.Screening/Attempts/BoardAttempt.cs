using ImpedanceScreen.Bench;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Status;
using ImpedanceScreen.Screening.Watching;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>
/// The way of one board from connect to the draft of its record. However it ends, all relays are opened before it
/// returns, and what was read until then is in the record.
/// </summary>
public sealed class BoardAttempt
{
    // A board whose supply is off gives its stored charge away within this time, or a person looks at it.
    private static readonly TimeSpan DischargeLimit = TimeSpan.FromSeconds(2);

    private readonly IBench bench;
    private readonly BenchSettings settings;
    private readonly StatusBoard status;
    private readonly AttemptOrder order;
    private readonly TimeLedger ledger;
    private readonly BenchWatch watch;
    private readonly LoadPointRunner runner;
    private readonly List<Task<StateResult>> results = [];
    private readonly int pointsPlanned;
    private IReadOnlyList<Lane> underWay = [];
    private int pointsRead;
    private double? temperatureDegC;

    /// <summary>Prepares an attempt; its time begins here.</summary>
    public BoardAttempt(IBench bench, AttemptOrder order, BenchSettings settings, StatusBoard status)
    {
        this.bench = bench;
        this.order = order;
        this.settings = settings;
        this.status = status;
        ledger = new TimeLedger(settings.Time);
        watch = new BenchWatch(bench, order.Job.Fixture.Inputs.Poll, settings.Time);
        runner = new LoadPointRunner(bench, order.Job, watch, ledger, settings.Time, settings.TimeScale);
        pointsPlanned = order.Job.States.Sum(state => state.Loads.Count + 2);
    }

    /// <summary>Runs the attempt.</summary>
    /// <param name="cancellation">Ends the attempt early: relays open, disposition aborted. Never throws for
    /// it.</param>
    public async Task<AttemptEnd> RunAsync(CancellationToken cancellation)
    {
        Exception? interruption = null;
        try
        {
            await MeasureAsync(cancellation);
        }
        catch (Exception e) when (e is AttemptAbandonedException or BenchFaultException or OperationCanceledException)
        {
            interruption = e;
        }

        AllOpenOutcome allOpen = await bench.OpenAllAsync();
        StateResult[] evaluated = InOrderOfTheLimitFile([.. await Task.WhenAll(results), .. Abandoned()]);
        return new AttemptEnd(Draft(evaluated, interruption, allOpen), allOpen, interruption);
    }

    private async Task MeasureAsync(CancellationToken cancellation)
    {
        await watch.PollAsync(cancellation);
        temperatureDegC = await bench.ReadTemperatureAsync(cancellation);
        if (order.Job.Fixture.BoardSupply is { } supply)
        {
            Switched on = await ledger.SwitchingAsync(
                bench.SwitchAsync(new SwitchOrder([], [supply.Relay]), watch.PollIfDueAsync, cancellation));
            runner.WarmedUp = Deadline.After(
                settings.Time, on.AcknowledgedTimestamp, on.ContactTime + (supply.WarmUp * settings.TimeScale));
        }

        foreach (IReadOnlyList<Lane> wave in Schedule.Waves(order.Job))
        {
            await RunWaveAsync(wave, cancellation);
        }

        if (order.Job.Fixture.BoardSupply is not null)
        {
            await DischargeAsync(order.Job.Fixture.BoardSupply, cancellation);
        }
    }

    /// <summary>
    /// Works the lanes of a wave off. While the meter reads one lane, the next loads of the others are switched and
    /// settle; with a single lane everything is done one after another.
    /// </summary>
    private async Task RunWaveAsync(IReadOnlyList<Lane> lanes, CancellationToken cancellation)
    {
        underWay = lanes;
        Queue<Lane> outside = new(lanes);
        Queue<Lane> toPrepare = new();
        Queue<Lane> prepared = new();
        int inside = 0;
        while (true)
        {
            while (inside < order.Job.Fixture.OutputsLoadedAtOnce && outside.TryDequeue(out Lane? entering))
            {
                entering.TakeNextState();
                toPrepare.Enqueue(entering);
                inside++;
            }

            if (prepared.Count == 0)
            {
                if (!toPrepare.TryDequeue(out Lane? first))
                {
                    return;
                }

                if (await PrepareAsync(first, cancellation))
                {
                    prepared.Enqueue(first);
                }
                else
                {
                    inside--;
                }

                continue;
            }

            Lane lane = prepared.Dequeue();
            Show(lane);
            bool? proved = await runner.SettleAsync(lane, cancellation);
            IReadOnlyList<MeterReading> readings = await watch.BesideAsync(
                token => runner.ReadAsync(lane, token),
                async reading =>
                {
                    while (!reading.IsCompleted && toPrepare.TryDequeue(out Lane? next))
                    {
                        await watch.PollIfDueAsync(cancellation);
                        if (await PrepareAsync(next, cancellation))
                        {
                            prepared.Enqueue(next);
                        }
                        else
                        {
                            inside--;
                        }
                    }
                },
                cancellation);
            lane.Add(new LoadPointReadings(lane.Wanted!.Point, proved, readings));
            pointsRead++;
            toPrepare.Enqueue(lane);
        }
    }

    /// <summary>Brings a lane to its next load point, over to its next state where its plan ended.</summary>
    /// <returns>False where the lane has come to its end.</returns>
    private async Task<bool> PrepareAsync(Lane lane, CancellationToken cancellation)
    {
        if (lane.Wanted is null)
        {
            Judge(lane);
            if (!lane.TakeNextState())
            {
                await runner.DisconnectAsync(lane, cancellation);
                return false;
            }
        }

        if (lane.Taken.Count == 0)
        {
            await runner.ConnectAsync(lane, cancellation);
        }
        else
        {
            await runner.LoadAsync(lane, cancellation);
        }

        return true;
    }

    // Off the bench loop: the next load point must not wait for arithmetic.
    private void Judge(Lane lane)
    {
        StateJob state = lane.State!;
        IReadOnlyList<LoadPointReadings> taken = lane.Taken;
        results.Add(Task.Factory.StartNew(
            () => StateEvaluation.Evaluate(
                state, taken, Temperature, DiagnosticAlarm.TestsOf(order.Job), order.StartedAt),
            CancellationToken.None,
            TaskCreationOptions.DenyChildAttach,
            settings.Arithmetic));
    }

    // What was read of states whose plan did not come to its end; none after an attempt that did.
    private IEnumerable<StateResult> Abandoned() => underWay
        .Where(lane => lane is { State: not null, Taken.Count: > 0 })
        .Select(lane => StateEvaluation.Abandoned(lane.State!, lane.Taken, order.StartedAt));

    private Uncertain? Temperature =>
        temperatureDegC is { } measured && order.Job.Fixture.TemperatureSensor is { } sensor
            ? new Uncertain(measured, sensor.StandardUncertaintyDegC)
            : null;

    // The schedule measures what shares a load return together; people read the order of the limit file.
    private StateResult[] InOrderOfTheLimitFile(IReadOnlyList<StateResult> measured) =>
    [
        .. order.Job.States.SelectMany(state => measured.Where(result =>
            result.Output == state.Output.Name && result.State == state.State.Name)),
    ];

    private async Task DischargeAsync(BoardSupply supply, CancellationToken cancellation)
    {
        await ledger.SwitchingAsync(bench.SwitchAsync(new SwitchOrder([supply.Relay], []), watch.PollIfDueAsync, cancellation));
        Deadline limit = Deadline.In(settings.Time, DischargeLimit);
        foreach (StateJob state in order.Job.States.DistinctBy(state => state.Output.Name))
        {
            Deadline atRest = await runner.SenseAsync(state.Meter, state.Output.Sense, cancellation);
            await ledger.SettlingAsync(watch.UntilAsync(atRest, cancellation), atRest.Remaining);
            while (!await IsDischargedAsync(state, supply, limit, cancellation))
            {
            }
        }
    }

    private async Task<bool> IsDischargedAsync(
        StateJob state, BoardSupply supply, Deadline limit, CancellationToken cancellation)
    {
        IReadOnlyList<MeterReading> readings = await ledger.ReadingAsync(
            watch.BesideAsync(token => bench.ReadAsync(state.Meter, 1, token), cancellation),
            state.Meter.Integration * settings.TimeScale);
        MeterReading reading = readings[0];
        if (reading.Condition == ReadingCondition.Valid && Math.Abs(reading.Volt) <= supply.OffBelowVolt)
        {
            return true;
        }

        return limit.Passed
            ? throw new BenchFaultException(
                BenchFault.NotDischarged,
                $"output {state.Output.Name} still reads {reading.Raw} V with the supply off: stored energy or "
                + "a supply relay that did not open; do not touch the board before it is discharged")
            : false;
    }

    private void Show(Lane lane) =>
        status.Publish(
            Activity.Measuring,
            $"{lane.State!.Output.Name} {lane.State.State.Name} {lane.Wanted!.Point.Load?.Name ?? "unloaded"}",
            order.Serial,
            Math.Min(1.0, (double)pointsRead / pointsPlanned));

    private BoardRecord Draft(StateResult[] evaluated, Exception? interruption, AllOpenOutcome allOpen)
    {
        (Disposition disposition, string cause) = BoardDisposition.Of(order, evaluated, interruption, allOpen);
        return new BoardRecord(
            order.AttemptId,
            settings.Station,
            order.Serial,
            order.Attempt,
            order.PreviousAttemptId,
            order.Job.Limits.Product,
            order.Job.Limits.Revision,
            order.Lot,
            order.Operator,
            order.Job.Fixture.Name,
            order.StartedAt,
            settings.Time.GetUtcNow(),
            settings.ProgramVersion,
            order.Job.Limits.Source.Sha256,
            order.Job.Fixture.Source.Sha256,
            [.. settings.Meters.Select(meter => new MeterUsed(meter.Key, meter.Value))],
            temperatureDegC,
            evaluated,
            disposition,
            cause,
            ledger.Close());
    }
}
