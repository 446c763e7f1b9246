using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Binds fixture files. Every key is documented in <c>fixtures/README.md</c>.</summary>
public static class FixtureFileBinder
{
    /// <summary>The word that a fixture file's <c>kind</c> is.</summary>
    public const string Kind = "fixture";

    /// <summary>Highest voltage of a supply or rail within the program's scope, V DC.</summary>
    internal const double HighestVoltageVolt = 60.0;

    /// <summary>Binds a file: the fixture file, or every mistake in it.</summary>
    public static Checked<FixtureFile> Bind(FileText file) =>
        FileBinder.Bind(file, Kind, reader => Read(file, reader));

    private static FixtureFile Read(FileText file, MappingReader reader)
    {
        FixtureNames names = new();
        FixtureFile fixture = new(
            file,
            reader.Text("name"),
            reader.Text("revision"),
            reader.Mappings("links", 1, link => LinkReader.Link(link, names)),
            reader.Mappings("relay_units", 1, unit => LinkReader.Unit(unit, names)),
            reader.OptionalMapping("board_supply", supply => Supply(supply, names)),
            reader.Mappings("load_returns", 0, item => LoadReader.Return(item, names)),
            reader.OptionalMapping("common_return", relay => RelayReader.Relay(relay, names)),
            reader.Mappings("load_banks", 1, bank => LoadReader.Bank(bank, names)),
            reader.Mappings("stimuli", 0, stimulus => Stimulus(stimulus, names)),
            reader.Mappings("outputs", 1, output => Output(output, names)),
            reader.Integer("outputs_loaded_at_once", 1, 64),
            reader.Mappings("meters", 1, meter => MeterReader.Meter(meter, names)),
            reader.OptionalMapping("temperature_sensor", sensor => Sensor(sensor, names)),
            reader.Mapping("inputs", inputs => Inputs(inputs, names)),
            reader.OptionalMapping("handshake", handshake => Handshake(handshake, names)));
        names.Check();
        return fixture;
    }

    private static BoardSupply Supply(MappingReader reader, FixtureNames names) => new(
        reader.Mapping("relay", relay => RelayReader.Relay(relay, names)),
        reader.Number("voltage_v", new(-HighestVoltageVolt, HighestVoltageVolt)),
        reader.Number("current_limit_a", NumberRange.Positive),
        reader.Duration("warm_up_ms", NumberRange.UpTo(600_000)),
        reader.Number("off_below_v", NumberRange.Positive));

    private static Stimulus Stimulus(MappingReader reader, FixtureNames names) => new(
        names.Stimuli.Declare(reader),
        reader.Mapping("relay", relay => RelayReader.Relay(relay, names)));

    private static FixtureOutput Output(MappingReader reader, FixtureNames names) => new(
        names.Outputs.Declare(reader),
        reader.Mapping("selector", relay => RelayReader.Relay(relay, names)),
        reader.Mapping("sense", relay => RelayReader.Relay(relay, names)),
        names.Meters.Refer(reader, "meter"),
        names.Banks.Refer(reader, "load_bank"),
        reader.Text("group"),
        reader.Word("sensing", ("two-wire", Sensing.TwoWire), ("terminal", Sensing.Terminal)),
        new(
            reader.Number("lead_resistance_ohm", NumberRange.ZeroOrMore),
            reader.Number("lead_standard_uncertainty_ohm", NumberRange.ZeroOrMore)),
        reader.Word(
            "load_current_proof",
            ("contact-readback", LoadCurrentProof.ContactReadback),
            ("change-from-unloaded", LoadCurrentProof.ChangeFromUnloaded)));

    private static TemperatureSensor Sensor(MappingReader reader, FixtureNames names) => new(
        names.Units.Refer(reader, "unit"),
        (ushort)reader.Integer("register", 0, ushort.MaxValue),
        reader.Number("deg_c_per_count", NumberRange.Positive),
        reader.Number("standard_uncertainty_deg_c", NumberRange.ZeroOrMore));

    private static BenchInputs Inputs(MappingReader reader, FixtureNames names) => new(
        reader.OptionalMapping("board_present", input => RelayReader.Input(input, names)),
        reader.Mapping("interlock", input => RelayReader.Input(input, names)),
        reader.Duration("poll_ms", new(1, 1000)));

    private static Handshake Handshake(MappingReader reader, FixtureNames names) => new(
        reader.Mapping("pass_bin", relay => RelayReader.Relay(relay, names)),
        reader.Mapping("fail_bin", relay => RelayReader.Relay(relay, names)),
        reader.OptionalMapping("retest_bin", relay => RelayReader.Relay(relay, names)),
        reader.Mapping("busy", relay => RelayReader.Relay(relay, names)),
        reader.Mapping("done", relay => RelayReader.Relay(relay, names)));
}
