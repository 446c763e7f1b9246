using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.SimulatedBench.Circuits;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Meters;
using ImpedanceScreen.SimulatedBench.Populations;
using ImpedanceScreen.SimulatedBench.Relays;

namespace ImpedanceScreen.SimulatedBench;

/// <summary>The bench behind all links: units, inputs, circuit, meters.</summary>
/// <remarks>Whoever touches it holds <see cref="Gate"/>; nobody waits while holding it.</remarks>
internal sealed class BenchModel
{
    private readonly FixtureFile fixture;
    private readonly BenchTruth truth;
    private readonly Circuit circuit;
    private readonly Dictionary<SimulatedUnit, Watchdog> watchdogs = [];

    public BenchModel(ScreeningJob job, Surroundings surroundings, ulong seed, BenchClock clock, BenchLog log)
    {
        fixture = job.Fixture;
        Clock = clock;
        Log = log;
        truth = new BenchTruth(fixture, surroundings, seed);
        circuit = new Circuit(job, truth, seed);
        circuit.SetCoilSupply(on: false, Seconds);
        Units = [.. fixture.RelayUnits.Select(MakeUnit)];
        foreach (SimulatedUnit unit in Units)
        {
            if (unit.Unit.WatchdogSilence is { } silence)
            {
                watchdogs[unit] = new Watchdog(this, unit, silence);
            }
        }

        Meters = [.. fixture.Meters.Select(
            meter => new SimulatedMeter(this, meter, circuit, truth, surroundings.MeterTurnaround, seed))];
    }

    public Lock Gate { get; } = new();

    public BenchClock Clock { get; }

    public BenchLog Log { get; }

    public ChangeSignal Changed { get; } = new();

    public IReadOnlyList<SimulatedUnit> Units { get; }

    public IReadOnlyList<SimulatedMeter> Meters { get; }

    public IEnumerable<Watchdog> Watchdogs => watchdogs.Values;

    /// <summary>The board in the nest; null where none is.</summary>
    public SimulatedBoard? Board { get; private set; }

    public bool InterlockClosed { get; private set; }

    /// <summary>Seconds of the physics now.</summary>
    public double Seconds => Clock.PhysicsSeconds(Clock.Now);

    /// <summary>Lets a unit answer a request.</summary>
    /// <returns>Length of the answer.</returns>
    public int Answer(SimulatedUnit unit, ReadOnlySpan<byte> request, Span<byte> answer)
    {
        lock (Gate)
        {
            if (watchdogs.TryGetValue(unit, out Watchdog? watchdog))
            {
                watchdog.Feed();
            }

            circuit.AdvanceTo(Seconds);
            return unit.Answer(request, answer);
        }
    }

    public void SetBoard(SimulatedBoard? board)
    {
        lock (Gate)
        {
            circuit.SetBoard(board, Seconds);
            Board = board;
            Log.Add(new InputChanged("board-present", board is not null));
        }

        Changed.Raise();
    }

    /// <summary>Opens or closes the interlock; its contact cuts the supply of the relay coils.</summary>
    public void SetInterlock(bool closed)
    {
        lock (Gate)
        {
            if (InterlockClosed != closed)
            {
                InterlockClosed = closed;
                circuit.SetCoilSupply(closed, Seconds);
                Log.Add(new InputChanged("interlock", closed));
            }
        }
    }

    public bool IsOn(Relay relay)
    {
        lock (Gate)
        {
            return Units.First(unit => unit.Unit.Name == relay.Unit).IsOn(relay.Coil);
        }
    }

    private SimulatedUnit MakeUnit(RelayUnit unit)
    {
        Dictionary<ushort, Func<bool>> inputs = Inputs(unit.Name);
        return new SimulatedUnit(unit, UnitAddresses.Of(fixture, unit.Name))
        {
            ReadInput = address => inputs.TryGetValue(address, out Func<bool>? read) && read(),
            ReadInputRegister = address => address == fixture.TemperatureSensor!.Register ? TemperatureCount() : (ushort)0,
            CoilChanged = (coil, on, cause) =>
            {
                circuit.CommandCoil(unit.Name, coil, on, Seconds);
                Log.Add(new CoilChanged(unit.Name, coil, on, cause));
                Changed.Raise();
            },
        };
    }

    private Dictionary<ushort, Func<bool>> Inputs(string unit)
    {
        Dictionary<ushort, Func<bool>> inputs = [];
        foreach (Relay relay in FixtureRelays.Switching(fixture).Where(relay => relay.Unit == unit))
        {
            if (relay.ContactInput is { } input)
            {
                inputs[input] = () => circuit.IsClosed(relay);
            }
        }

        if (fixture.Inputs.BoardPresent is { } present && present.Unit == unit)
        {
            inputs[present.Address] = () => Board is not null;
        }

        if (fixture.Inputs.Interlock.Unit == unit)
        {
            inputs[fixture.Inputs.Interlock.Address] = () => InterlockClosed;
        }

        return inputs;
    }

    private ushort TemperatureCount()
    {
        double counts = (truth.TemperatureDegC + truth.SensorErrorDegC) / fixture.TemperatureSensor!.DegCPerCount;
        return unchecked((ushort)(short)Math.Clamp(Math.Round(counts), short.MinValue, short.MaxValue));
    }
}
