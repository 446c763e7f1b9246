using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Reads links and relay units of a fixture file.</summary>
internal static class LinkReader
{
    // Faster than any serial adapter in use; the silent interval of Modbus is defined far below.
    private const int HighestBaud = 4_000_000;

    internal static Link Link(MappingReader reader, FixtureNames names)
    {
        string name = names.Links.Declare(reader);
        bool serial = reader.Word("kind", ("tcp", false), ("serial", true));
        TimeSpan timeout = reader.Duration("timeout_ms", new(1, 60_000));
        int retries = reader.Integer("retries", 0, 10);
        return serial ? Serial(reader, name, timeout, retries) : Tcp(reader, name, timeout, retries);
    }

    internal static RelayUnit Unit(MappingReader reader, FixtureNames names)
    {
        string name = names.Units.Declare(reader);
        return new(
            name,
            names.Links.Refer(reader, "link"),
            (byte)reader.Integer("unit_address", 1, 247),
            reader.Duration("operate_ms", NumberRange.UpTo(1000)),
            reader.Duration("release_ms", NumberRange.UpTo(1000)),
            reader.Duration("longest_answer_ms", NumberRange.PositiveUpTo(60_000)),
            reader.OptionalDuration("watchdog_ms", NumberRange.PositiveUpTo(60_000)));
    }

    private static TcpLink Tcp(MappingReader reader, string name, TimeSpan timeout, int retries) =>
        new(name, reader.Text("host"), reader.Integer("port", 1, 65_535), timeout, retries);

    private static SerialLink Serial(MappingReader reader, string name, TimeSpan timeout, int retries) => new(
        name,
        reader.Text("device"),
        reader.Integer("baud", 300, HighestBaud),
        reader.Word("parity", ("none", LineParity.None), ("even", LineParity.Even), ("odd", LineParity.Odd)),
        reader.Integer("stop_bits", 1, 2),
        timeout,
        retries,
        reader.OptionalFlag("echo_expected", otherwise: false));
}
