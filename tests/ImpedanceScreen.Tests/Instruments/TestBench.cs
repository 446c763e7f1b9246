using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>A bench of two relay units on one link, two outputs, two loads, one meter.</summary>
internal static class TestBench
{
    public const byte SecondUnit = 18;

    public static readonly MeterRange TenVolt = new(10, 25e-6, 5e-5, 2e-5, 60, 1e-6, 1e10, 0.1);

    public static readonly Meter Meter = new(
        "M1", "meter", MeterPeer.DefaultIdentity, TimeSpan.FromMilliseconds(2), 0.1, "C1",
        new(2026, 1, 1), new(2027, 1, 1),
        [TenVolt, TenVolt with { FullScaleVolt = 0.1 }]);

    // Coils 0 to 5 and 8 of the first unit are the bench's; 6 and 7 are nobody's, 10 to 14 the handshake's.
    public static readonly Relay Load1 = new("K1", 0, 20);
    public static readonly Relay Load2 = new("K1", 1, 21);
    public static readonly Relay Selector1 = new("K1", 2, null);
    public static readonly Relay Selector2 = new("K1", 3, null);
    public static readonly Relay Sense1 = new("K1", 4, null);
    public static readonly Relay Sense2 = new("K1", 5, null);
    public static readonly Relay Stimulus = new("K1", 8, null);
    public static readonly Relay Supply = new("K2", 0, null);
    public static readonly Relay Rail = new("K2", 1, null);
    public static readonly Relay RailSense = new("K2", 2, null);
    public static readonly Relay Common = new("K2", 3, null);

    public static readonly TimeSpan Operate = TimeSpan.FromMilliseconds(6);
    public static readonly TimeSpan Release = TimeSpan.FromMilliseconds(4);

    public static FixtureFile Fixture { get; } = new(
        new FileText("bench.yaml", "name: bench"),
        "bench",
        "A",
        [TestLinks.Tcp() with { Name = "relays" }, TestLinks.Tcp() with { Name = "meter" }],
        [Unit("K1", ModbusPeer.Unit), Unit("K2", SecondUnit)],
        new BoardSupply(Supply, 12, 0.5, TimeSpan.Zero, 0.1),
        [new LoadReturn("rail", Rail, RailSense, "M1", new Uncertain(5, 0.01), 0.1)],
        Common,
        [new LoadBank("bank", [Load("R1", Load1, 1000), Load("R2", Load2, 470)])],
        [new Stimulus("drive", Stimulus)],
        [Output("OUT1", Selector1, Sense1), Output("OUT2", Selector2, Sense2)],
        1,
        [Meter],
        new TemperatureSensor("K1", 7, 0.01, 0.1),
        new BenchInputs(new InputPoint("K1", 30), new InputPoint("K1", 31), TimeSpan.FromMilliseconds(10)),
        new Handshake(HandshakeCoil(10), HandshakeCoil(11), HandshakeCoil(12), HandshakeCoil(13), HandshakeCoil(14)));

    private static Relay HandshakeCoil(ushort coil) => new("K1", coil, null);

    private static RelayUnit Unit(string name, byte address) =>
        new(name, "relays", address, Operate, Release, TestLinks.LongestAnswer, TimeSpan.FromSeconds(3));

    private static Load Load(string name, Relay relay, double ohm) => new(
        name, relay, ohm, 0.1, 2, null, "C2", new(2026, 1, 1), new(2027, 1, 1),
        0, 23, 0, 0.5, new Uncertain(0.1, 0.01));

    private static FixtureOutput Output(string name, Relay selector, Relay sense) => new(
        name, selector, sense, "M1", "bank", "G", Sensing.Terminal, new Uncertain(0.05, 0.01),
        LoadCurrentProof.ContactReadback);
}
