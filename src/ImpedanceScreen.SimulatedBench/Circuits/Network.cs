using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>Where every node of the bench is heading, from the contacts, the board and the true values.</summary>
internal sealed class Network(ScreeningJob job, BenchTruth truth, ContactBank contacts)
{
    // Cable and relay capacitance of one output's path.
    private const double StrayFarad = 100e-12;

    // A source without any resistance would make a circuit of ideal sources that fight each other.
    private const double LeastOhm = 1e-6;

    // Dissipation depends on voltage and voltage, by self-heating, on dissipation; parts in a million of each other.
    private const int HeatingPasses = 3;

    public SimulatedBoard? Board { get; set; }

    /// <summary>Whether the board has its power.</summary>
    public bool IsPowered { get; set; }

    /// <summary>Sets target and time constant of every node.</summary>
    /// <param name="nodes">The nodes.</param>
    /// <param name="inputOhm">Input resistance of a meter at its present range, Ω, by name.</param>
    public void Settle(IReadOnlyList<SourceNode> nodes, Func<string, double> inputOhm)
    {
        foreach (LoadBank bank in job.Fixture.LoadBanks)
        {
            List<SourceNode> selected = [.. nodes.Where(
                node => node.Output.LoadBank == bank.Name && contacts.IsClosed(node.Output.Selector))];
            Settle(selected, inputOhm, bank);
        }

        foreach (SourceNode node in nodes.Where(node => !contacts.IsClosed(node.Output.Selector)))
        {
            Settle([node], inputOhm, bank: null);
        }
    }

    private void Settle(List<SourceNode> selected, Func<string, double> inputOhm, LoadBank? bank)
    {
        List<Port> ports = [.. selected.Select(node => PortOf(node, inputOhm))];
        Bus bus = Solve(ports, bank);
        for (int i = 0; i < selected.Count; i++)
        {
            SourceNode node = selected[i];
            TrueSource? source = SourceOf(node);
            double siemens = bus.PointSiemens(i);
            node.TargetVolt = bus.PointVolt(i);
            node.TimeConstantSeconds = siemens == 0.0
                ? double.PositiveInfinity
                : ((source?.CapacitanceFarad ?? 0.0) + StrayFarad) / siemens;
            node.NoiseVolt = IsPowered ? source?.NoiseVolt ?? 0.0 : 0.0;
        }
    }

    private Bus Solve(List<Port> ports, LoadBank? bank)
    {
        if (bank is null || ReturnVolt() is not { } returnVolt)
        {
            return new Bus(ports, loadSiemens: 0.0, returnVolt: 0.0);
        }

        List<TrueLoad> loads = [.. bank.Loads.Where(load => contacts.IsClosed(load.Relay)).Select(truth.Load)];
        Bus bus = new(ports, loads.Sum(load => 1.0 / load.PathOhm(0.0)), returnVolt);
        for (int pass = 0; pass < HeatingPasses && loads.Count > 0; pass++)
        {
            double across = bus.Volt - returnVolt;
            bus = new(ports, loads.Sum(load => 1.0 / load.PathOhm(Dissipation(load, across))), returnVolt);
        }

        return bus;
    }

    private static double Dissipation(TrueLoad load, double acrossVolt) =>
        Math.Pow(acrossVolt / load.PathOhm(0.0), 2) * load.ColdOhm;

    // Voltage of the load banks' far end; null where it hangs in the air. Common is the stronger one.
    private double? ReturnVolt()
    {
        if (job.Fixture.CommonReturn is not { } common || contacts.IsClosed(common))
        {
            LoadReturn? instead = job.Fixture.CommonReturn is null ? ClosedRail() : null;
            return instead is null ? 0.0 : truth.RailVolt(instead.Name);
        }

        return ClosedRail() is { } rail ? truth.RailVolt(rail.Name) : null;
    }

    private LoadReturn? ClosedRail() =>
        job.Fixture.LoadReturns.FirstOrDefault(rail => contacts.IsClosed(rail.Relay));

    private Port PortOf(SourceNode node, Func<string, double> inputOhm)
    {
        FixtureOutput output = node.Output;
        bool isSensed = contacts.IsClosed(output.Sense);
        double meterSiemens = isSensed ? 1.0 / inputOhm(output.Meter) : 0.0;
        bool isTwoWire = output.Sensing == Sensing.TwoWire;
        if (SourceOf(node) is not { } source)
        {
            return new Port(0.0, double.PositiveInfinity, 0.0, meterSiemens, double.PositiveInfinity);
        }

        bool isLive = IsPowered && node.Driven(contacts.IsClosed) is not null;
        double lead = truth.LeadOhm(output, Board!.Ordinal);
        return new Port(
            isLive ? source.VoltageVolt : 0.0,
            Math.Max(LeastOhm, source.ResistanceOhm + (isTwoWire ? lead : 0.0)),
            isTwoWire ? 0.0 : lead,
            meterSiemens,
            source.CurrentLimitAmpere ?? double.PositiveInfinity);
    }

    // An output that no stimulus drives still has the resistance of its first state, with nothing behind it.
    private TrueSource? SourceOf(SourceNode node)
    {
        if (Board is null || node.States.Count == 0)
        {
            return null;
        }

        DriveState state = node.Driven(contacts.IsClosed) ?? node.States[0].State;
        return Board.Source(node.Output.Name, state.Name);
    }
}
