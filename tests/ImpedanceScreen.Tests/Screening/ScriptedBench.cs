using System.Globalization;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;

namespace ImpedanceScreen.Tests.Screening;

/// <summary>
/// A bench in memory with perfect linear sources: notes every event in order and misbehaves when told to. Time passes
/// only in the meter, where it is told to integrate.
/// </summary>
internal sealed class ScriptedBench(ScreeningJob job, TimeProvider time) : IBench
{
    private readonly HashSet<Relay> closed = [];
    private HandshakeState handshake;
    private bool present = true;

    /// <summary>Everything that happened, in order.</summary>
    public List<string> Events { get; } = [];

    /// <summary>Called before each operation with its event; may throw what the bench would throw.</summary>
    public Action<string> Before { get; set; } = _ => { };

    public Func<InputState, InputState> Inputs { get; set; } = inputs => inputs;

    public IReadOnlySet<Relay> Closed => closed;

    public bool CanOpen { get; set; } = true;

    /// <summary>How long the meter integrates.</summary>
    public TimeSpan Integration { get; set; }

    /// <summary>Handshake coils as an earlier process left them.</summary>
    public HandshakeState Handshake
    {
        get => handshake;
        set => handshake = value;
    }

    /// <summary>Whether a handler takes a board away when it is told.</summary>
    public bool Leaves { get; set; } = true;

    public bool Present
    {
        get => present;
        set => present = value;
    }

    public async Task<BenchStart> StartAsync(CancellationToken cancellation)
    {
        Note("start");
        AllOpenOutcome open = await OpenAllAsync();
        return new BenchStart(open, handshake, new Dictionary<string, string> { ["meter"] = "MAKER,MODEL,1,1" });
    }

    public Task<InputState> PollInputsAsync(CancellationToken cancellation)
    {
        cancellation.ThrowIfCancellationRequested();
        Note("poll");
        return Task.FromResult(Inputs(new InputState(present, InterlockClosed: true)));
    }

    public Task<Switched> SwitchAsync(
        SwitchOrder order, Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        cancellation.ThrowIfCancellationRequested();
        Note($"switch open {Names(order.Open)} close {Names(order.Close)}");
        closed.ExceptWith(order.Open);
        closed.UnionWith(order.Close);
        return Task.FromResult(new Switched(time.GetTimestamp(), TimeSpan.FromMilliseconds(2)));
    }

    public Task<ContactCheck> CheckContactsAsync(
        Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        Note("contacts");
        return Task.FromResult(new ContactCheck([.. closed.Where(relay => relay.ContactInput is not null)], [], []));
    }

    public Task SetRangeAsync(Meter meter, MeterRange range, CancellationToken cancellation) => Task.CompletedTask;

    public async Task<IReadOnlyList<MeterReading>> ReadAsync(Meter meter, int count, CancellationToken cancellation)
    {
        List<MeterReading> readings = [];
        while (readings.Count < count)
        {
            cancellation.ThrowIfCancellationRequested();
            Note("read");
            double volt = Volt();
            if (Integration > TimeSpan.Zero)
            {
                await Task.Delay(Integration, time, cancellation);
                Note("read ends");
            }

            readings.Add(new MeterReading(
                volt.ToString("E8", CultureInfo.InvariantCulture), ReadingCondition.Valid, volt, time.GetUtcNow()));
        }

        return readings;
    }

    public Task<double?> ReadTemperatureAsync(CancellationToken cancellation) => Task.FromResult<double?>(23.0);

    public Task<AllOpenOutcome> OpenAllAsync()
    {
        Note("open all");
        if (!CanOpen)
        {
            return Task.FromResult(new AllOpenOutcome(false, "unit a coil 1 stays on"));
        }

        closed.Clear();
        return Task.FromResult(new AllOpenOutcome(true, ""));
    }

    public Task<HandshakeState> ReadHandshakeAsync(CancellationToken cancellation) => Task.FromResult(handshake);

    public Task SetHandshakeAsync(HandshakeState state, CancellationToken cancellation)
    {
        cancellation.ThrowIfCancellationRequested();
        Note($"handshake {state.Bin}{(state.Busy ? " busy" : "")}{(state.Done ? " done" : "")}");
        bool wasDone = handshake.Done;
        handshake = state;
        if (state.Done && !wasDone && Leaves)
        {
            // A handler that is quick: the board is gone before the next poll.
            present = false;
        }
        else if (state is { Done: false, Busy: false })
        {
            present = true;
        }

        return Task.CompletedTask;
    }

    public ValueTask DisposeAsync() => ValueTask.CompletedTask;

    private double Volt()
    {
        StateJob? sensed = job.States.FirstOrDefault(state =>
            closed.Contains(state.Output.Sense) && (state.Stimulus is null || closed.Contains(state.Stimulus.Relay)));
        if (sensed is null || (job.Fixture.BoardSupply is { } supply && !closed.Contains(supply.Relay)))
        {
            return 0;
        }

        Load? load = sensed.Loads.FirstOrDefault(each => closed.Contains(each.Relay));
        double source = sensed.State.Nominal.SourceVoltageVolt;
        double meter = 1.0 / sensed.Range.InputOhm;
        double lead = sensed.Output.Sensing == Sensing.TwoWire ? sensed.Output.LeadOhm.Value : 0;
        double inner = sensed.State.Nominal.InternalResistanceOhm + lead;
        double conductance = load is null
            ? 0
            : 1.0 / (load.ResistanceOhm + load.BranchOhm.Value + (lead == 0 ? sensed.Output.LeadOhm.Value : 0));
        return source / (1.0 + (inner * (conductance + meter)));
    }

    private void Note(string what)
    {
        Before(what);
        Events.Add(what);
    }

    private static string Names(IReadOnlyList<Relay> relays) =>
        relays.Count == 0 ? "-" : string.Join(",", relays.Select(relay => relay.Coil));
}
