using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>
/// A bench whose stated values have no uncertainty, so that the true ones are known: outputs A and B (A two-wire, B
/// terminal) on one bank, loads of 10, 100 and 1000 Ω, a 5 V rail beside common, a supply and a handshake.
/// </summary>
internal sealed record ExactBench
{
    public const double RailVolt = 5.0;

    public static Relay Selector(string output) => new("unit", (ushort)(output == "A" ? 0 : 1), (ushort)(output == "A" ? 0 : 1));

    public static Relay Sense(string output) => new("unit", (ushort)(output == "A" ? 2 : 3), null);

    public static Relay Common { get; } = new("unit", 4, 4);

    public static Relay Rail { get; } = new("unit", 5, 5);

    public static Relay RailSense { get; } = new("unit", 6, null);

    public static Relay Supply { get; } = new("unit", 7, 7);

    public static Relay Stimulus { get; } = new("unit", 8, null);

    public static Handshake Handshake { get; } = new(
        new("unit", 20, null), new("unit", 21, null), null, new("unit", 22, null), new("unit", 23, null));

    public double LeadOhm { get; init; }

    public double BranchOhm { get; init; }

    public double InputOhm { get; init; } = double.PositiveInfinity;

    public double CapacitanceFarad { get; init; }

    public double? CurrentLimitAmpere { get; init; }

    public double VoltageVolt { get; init; } = 2.0;

    public double ResistanceOhm { get; init; } = 10.0;

    public TimeSpan? Watchdog { get; init; }

    public bool HasHandshake { get; init; } = true;

    public Link RelayLink { get; init; } = new TcpLink("relays", "127.0.0.1", 15020, TimeSpan.FromSeconds(1), 0);

    public Link MeterLink { get; init; } = new TcpLink("meter", "127.0.0.1", 15025, TimeSpan.FromSeconds(1), 0);

    public static Load LoadOf(string name, double ohm, ushort coil, double branchOhm) => new(
        name, new Relay("unit", coil, coil), ohm, 0.0, 2.0, null, "none", default, default, 0.0, 23.0, 0.0, 10.0,
        new Uncertain(branchOhm, 0.0));

    public ScreeningJob Job()
    {
        MeterRange range = new(10.0, 0.0, 0.0, 0.0, 50, 1e-6, InputOhm, 0.0);
        Meter meter = new(
            "meter", "meter", "Impedance Screen,Test Meter,1,1", TimeSpan.FromMilliseconds(20), 1.0, "none", default, default,
            [range with { FullScaleVolt = 1.0 }, range]);
        LoadBank bank = new(
            "bank",
            [
                LoadOf("L10", 10.0, 10, BranchOhm), LoadOf("L100", 100.0, 11, BranchOhm),
                LoadOf("L1k", 1000.0, 12, BranchOhm),
            ]);
        Stimulus stimulus = new("drive", Stimulus);
        FixtureFile fixture = new(
            new FileText("exact.yaml", ""), "exact", "1", [RelayLink, MeterLink],
            [new RelayUnit(
                "unit", RelayLink.Name, 7, TimeSpan.FromMilliseconds(4), TimeSpan.FromMilliseconds(2),
                TimeSpan.FromMilliseconds(20), Watchdog)],
            new BoardSupply(Supply, 12.0, 1.0, TimeSpan.FromMilliseconds(40), 0.5),
            [new LoadReturn("rail", Rail, RailSense, "meter", new Uncertain(RailVolt, 0.0), 1.0)],
            Common, [bank], [stimulus],
            [Output("A", Sensing.TwoWire), Output("B", Sensing.Terminal)], 1, [meter],
            new TemperatureSensor("unit", 0, 0.1, 0.0),
            new BenchInputs(new InputPoint("unit", 16), new InputPoint("unit", 17), TimeSpan.FromMilliseconds(20)),
            HasHandshake ? Handshake : null);
        LimitFile limits = new(
            new FileText("exact-limits.yaml", ""), "Exact", "1", ".*", 12.0, UndecidedRule.Retest,
            [new OutputLimits("A", [State(null)]), new OutputLimits("B", [State("drive")])]);
        return new ScreeningJob(
            limits, fixture,
            [.. limits.Outputs.Select((output, i) => new StateJob(
                fixture.Outputs[i], output.States[0], i == 1 ? stimulus : null, null, bank.Loads, meter, range))]);
    }

    public Population Population(double defectiveShare = 0.0) => new(
        new FileText("exact-population.yaml", ""), "Exact",
        new Surroundings(23.0, 0.0, TimeSpan.FromMilliseconds(1), TimeSpan.FromMilliseconds(10)),
        defectiveShare, [], [Source("A"), Source("B")]);

    private FixtureOutput Output(string name, Sensing sensing) => new(
        name, Selector(name), Sense(name), "meter", "bank", "board", sensing, new Uncertain(LeadOhm, 0.0),
        LoadCurrentProof.ContactReadback);

    private SourcePopulation Source(string output) => new(
        output, "idle", VoltageVolt, 0.0, ResistanceOhm, 0.0, CapacitanceFarad, CurrentLimitAmpere, null);

    private DriveState State(string? stimulus) => new(
        "idle", stimulus, new NominalSource(VoltageVolt, ResistanceOhm), new Window(-5.0, 5.0), null, ["L10"],
        [
            new QuantityLimit(Quantity.SourceVoltage, VoltageVolt - 0.1, VoltageVolt + 0.1, DecisionRule.Simple, null),
            new QuantityLimit(Quantity.InternalResistance, null, ResistanceOhm + 1.0, DecisionRule.Simple, null),
        ],
        new AllowedLoading(1.0, 1.0, TimeSpan.FromSeconds(1)), TimeSpan.FromMilliseconds(20), 3);
}
