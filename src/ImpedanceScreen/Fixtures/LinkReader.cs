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
        Link link = serial ? Serial(reader, name, timeout, retries) : Tcp(reader, name, timeout, retries);
        if (reader.Bound("name", "timeout_ms"))
        {
            names.LinksByName.TryAdd(name, link);
        }

        CheckEndpoint(reader, link, names);
        return link;
    }

    internal static RelayUnit Unit(MappingReader reader, FixtureNames names)
    {
        string name = names.Units.Declare(reader);
        RelayUnit unit = new(
            name,
            names.Links.Refer(reader, "link"),
            (byte)reader.Integer("unit_address", 1, 247),
            reader.Duration("operate_ms", NumberRange.UpTo(1000)),
            reader.Duration("release_ms", NumberRange.UpTo(1000)),
            reader.Duration("longest_answer_ms", NumberRange.PositiveUpTo(60_000)),
            reader.OptionalDuration("watchdog_ms", NumberRange.PositiveUpTo(60_000)));
        names.UnitAddresses.Claim(reader, "link", unit.Link, "unit_address", unit.UnitAddress);
        UseLink(reader, unit.Link, isMeter: false, names);
        names.Later(() => CheckTimeout(reader, "longest_answer_ms", unit.LongestAnswer, unit.Link, names));
        names.Later(() => FixtureChecks.CheckWatchdog(reader, unit, names));
        return unit;
    }

    /// <summary>Notes who uses a link: relay units may share one, a meter has its own.</summary>
    internal static void UseLink(MappingReader reader, string link, bool isMeter, FixtureNames names)
    {
        if (reader.Bound("link")
            && !names.LinkUsers.TryAdd(link, (reader.Path, isMeter))
            && (isMeter || names.LinkUsers[link].IsMeter))
        {
            reader.Mistake(
                "link", $"`{link}` is used by {names.LinkUsers[link].Path} too", "give each meter a link of its own");
        }
    }

    /// <summary>What an instrument may take to answer must be less than what its link waits.</summary>
    internal static void CheckTimeout(
        MappingReader reader, string key, TimeSpan longest, string linkName, FixtureNames names)
    {
        if (reader.Bound(key, "link")
            && names.LinksByName.TryGetValue(linkName, out Link? link)
            && longest >= link.Timeout)
        {
            reader.Mistake(
                key, FormattableString.Invariant(
                    $"not below the time-out of link `{link.Name}`, {link.Timeout.TotalMilliseconds} ms"),
                "raise the link's timeout_ms: a good answer would be given up");
        }
    }

    private static void CheckEndpoint(MappingReader reader, Link link, FixtureNames names)
    {
        (string key, string endpoint) = link switch
        {
            SerialLink serial => ("device", serial.Device),
            TcpLink tcp => ("port", FormattableString.Invariant($"{tcp.Host}:{tcp.Port}")),
            _ => ("", ""),
        };
        bool known = link is SerialLink ? reader.Bound("device") : reader.Bound("host", "port");
        if (known && !names.Endpoints.TryAdd(endpoint, reader.Path))
        {
            reader.Mistake(
                key, $"{names.Endpoints[endpoint]} leads to the same place", "use one link for all units on a line");
        }
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
