using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Tests.Screening;

/// <summary>A board with two outputs, one of them in two drive states, on a bench with handshake and supply.</summary>
internal static class SmallJob
{
    public static readonly MeterRange Range = new(10, 25e-6, 50e-6, 15e-6, 200, 1e-6, 1e7, 0.01);

    private static readonly DateOnly Calibrated = new(2026, 3, 2);
    private static readonly DateOnly Due = new(2027, 3, 2);

    public static ScreeningJob Make(bool ownBanks = false)
    {
        Meter meter = new("meter", "meter-link", "MAKER,MODEL,1,1", TimeSpan.FromMilliseconds(20), 1, "M-1", Calibrated, Due, [Range]);
        LoadBank one = Bank("bank-1", 10);
        LoadBank other = ownBanks ? Bank("bank-2", 20) : one;
        FixtureOutput alarm = Output("ALARM", 1, one, "group-1");
        FixtureOutput tide = Output("TIDE", 3, other, ownBanks ? "group-2" : "group-1");
        Stimulus high = new("alarm-high", Relay(5));
        Stimulus low = new("alarm-low", Relay(6));
        OutputLimits alarmLimits = new("ALARM", [State("high", "alarm-high", 4.8, 220), State("low", "alarm-low", 2.4, 100)]);
        OutputLimits tideLimits = new("TIDE", [State("idle", null, 2.5, 1000)]);
        LimitFile limits = new(
            new FileText("small.yaml", "small"), "Small-1", "A", "S-[0-9]{3}", 30, UndecidedRule.Retest, [alarmLimits, tideLimits]);
        FixtureFile fixture = new(
            new FileText("bench.yaml", "bench"), "small-bench", "1",
            [new TcpLink("relays", "127.0.0.1", 1, TimeSpan.FromMilliseconds(100), 1), new TcpLink("meter-link", "127.0.0.1", 2, TimeSpan.FromMilliseconds(100), 1)],
            [new RelayUnit("a", "relays", 1, TimeSpan.FromMilliseconds(2), TimeSpan.FromMilliseconds(1), TimeSpan.FromMilliseconds(5), null)],
            new BoardSupply(Relay(30), 12, 0.5, TimeSpan.FromMilliseconds(40), 0.1),
            [], null, ownBanks ? [one, other] : [one], [high, low], [alarm, tide], ownBanks ? 2 : 1, [meter], null,
            new BenchInputs(new InputPoint("a", 100), new InputPoint("a", 101), TimeSpan.FromMilliseconds(10)),
            new Handshake(Relay(40), Relay(41), Relay(42), Relay(43), Relay(44)));
        return new ScreeningJob(
            limits,
            fixture,
            [
                new StateJob(alarm, alarmLimits.States[0], high, null, one.Loads, meter, Range),
                new StateJob(alarm, alarmLimits.States[1], low, null, one.Loads, meter, Range),
                new StateJob(tide, tideLimits.States[0], null, null, other.Loads, meter, Range),
            ]);
    }

    private static DriveState State(string name, string? stimulus, double volt, double ohm) =>
        new(
            name, stimulus, new NominalSource(volt, ohm), new Window(volt - 0.2, volt + 0.2), null, ["L10k", "L4k7", "L2k2"],
            [
                new QuantityLimit(Quantity.SourceVoltage, volt - 0.1, volt + 0.1, new DecisionRule(1), null),
                new QuantityLimit(Quantity.InternalResistance, 0.9 * ohm, 1.1 * ohm, new DecisionRule(1), null),
            ],
            new AllowedLoading(0.02, 0.1, TimeSpan.FromSeconds(5)), TimeSpan.FromMilliseconds(20), 4);

    private static LoadBank Bank(string name, ushort coil) =>
        new(name, [Load("L10k", coil, 10_000), Load("L4k7", (ushort)(coil + 1), 4_700), Load("L2k2", (ushort)(coil + 2), 2_200)]);

    private static Load Load(string name, ushort coil, double ohm) =>
        new(name, Relay(coil), ohm, 2e-4 * ohm, 2, 5e-5 * ohm, "L-1", Calibrated, Due, 5e-6, 23, 1e-5, 0.5, new Uncertain(0.1, 0.01));

    private static FixtureOutput Output(string name, ushort coil, LoadBank bank, string group) =>
        new(
            name, Relay(coil), Relay((ushort)(coil + 1)), "meter", bank.Name, group, Sensing.TwoWire, new Uncertain(0.2, 0.02),
            LoadCurrentProof.ContactReadback);

    private static Relay Relay(ushort coil) => new("a", coil, coil);
}
