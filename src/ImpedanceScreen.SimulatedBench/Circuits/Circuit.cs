using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>
/// The whole measuring circuit through time. It goes from one contact's move to the next; in between every voltage is
/// an exponential, whose integral over a meter's window is exact.
/// </summary>
/// <remarks>One caller at a time. Times are seconds of the physics, already divided by the time scale.</remarks>
internal sealed class Circuit
{
    // The board's outputs come up at this part of the declared warm-up.
    private const double PowerUpPart = 0.5;

    private readonly FixtureFile fixture;
    private readonly BenchTruth truth;
    private readonly ContactBank contacts;
    private readonly Network network;
    private readonly List<SourceNode> nodes;
    private readonly Dictionary<string, MeterInput> inputs;
    private double nowSeconds;
    private double powerUpSeconds = double.PositiveInfinity;

    public Circuit(ScreeningJob job, BenchTruth truth, ulong seed)
    {
        fixture = job.Fixture;
        this.truth = truth;
        contacts = new ContactBank(fixture, seed);
        network = new Network(job, truth, contacts) { IsPowered = fixture.BoardSupply is null };
        nodes = [.. fixture.Outputs.Select(output => new SourceNode(
            output, [.. job.States.Where(state => state.Output.Name == output.Name)]))];
        inputs = fixture.Meters.ToDictionary(meter => meter.Name, meter => new MeterInput(meter));
        Settle();
    }

    public bool IsClosed(Relay relay) => contacts.IsClosed(relay);

    public void SetBoard(SimulatedBoard? board, double seconds)
    {
        AdvanceTo(seconds);
        network.Board = board;
        Settle();
    }

    public void SetCoilSupply(bool on, double seconds)
    {
        AdvanceTo(seconds);
        contacts.SetCoilSupply(on, nowSeconds);
    }

    public void CommandCoil(string unit, ushort coil, bool on, double seconds)
    {
        AdvanceTo(seconds);
        contacts.Command(unit, coil, on, nowSeconds);
    }

    public void SetInputResistance(string meter, double ohm, double seconds)
    {
        AdvanceTo(seconds);
        inputs[meter].InputOhm = ohm;
        Settle();
    }

    /// <summary>Begins an integration; its mean is there once the circuit has gone past its end.</summary>
    public Measurement Measure(string meter, double startSeconds, double endSeconds)
    {
        AdvanceTo(startSeconds);
        Measurement measurement = new(startSeconds, endSeconds);
        inputs[meter].Begin(measurement);
        return measurement;
    }

    /// <summary>Lets time go on; never backwards.</summary>
    public void AdvanceTo(double seconds)
    {
        while (nowSeconds < seconds)
        {
            double stop = Math.Min(seconds, Math.Min(contacts.NextMoveSeconds, powerUpSeconds));
            Pass(Math.Max(nowSeconds, stop));
            bool changes = false;
            while (contacts.NextMoveSeconds <= nowSeconds)
            {
                contacts.MoveNext();
                changes = true;
            }

            changes |= UpdatePower();
            if (changes)
            {
                Settle();
            }
        }
    }

    private void Pass(double untilSeconds)
    {
        foreach (MeterInput input in inputs.Values)
        {
            input.Advance(Seen(input), SeenRail(input), nowSeconds, untilSeconds);
        }

        foreach (SourceNode node in nodes)
        {
            node.Advance(untilSeconds - nowSeconds);
        }

        foreach (MeterInput input in inputs.Values)
        {
            input.Follow(Seen(input), SeenRail(input), untilSeconds - nowSeconds);
        }

        nowSeconds = untilSeconds;
    }

    private bool UpdatePower()
    {
        if (fixture.BoardSupply is not { } supply)
        {
            return false;
        }

        bool wasPowered = network.IsPowered;
        if (!contacts.IsClosed(supply.Relay))
        {
            powerUpSeconds = double.PositiveInfinity;
            network.IsPowered = false;
        }
        else if (nowSeconds >= powerUpSeconds)
        {
            powerUpSeconds = double.PositiveInfinity;
            network.IsPowered = true;
        }
        else if (!wasPowered && double.IsPositiveInfinity(powerUpSeconds))
        {
            powerUpSeconds = nowSeconds + (PowerUpPart * supply.WarmUp.TotalSeconds);
        }

        return wasPowered != network.IsPowered;
    }

    private void Settle() => network.Settle(nodes, meter => inputs[meter].InputOhm);

    private List<SourceNode> Seen(MeterInput input) =>
        [.. nodes.Where(node => node.Output.Meter == input.Name && contacts.IsClosed(node.Output.Sense))];

    private double? SeenRail(MeterInput input) =>
        fixture.LoadReturns.FirstOrDefault(rail => rail.Meter == input.Name && contacts.IsClosed(rail.SenseRelay))
            is { } rail
            ? truth.RailVolt(rail.Name)
            : null;
}
