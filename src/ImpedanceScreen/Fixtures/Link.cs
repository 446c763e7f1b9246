namespace ImpedanceScreen.Fixtures;

/// <summary>A way to an instrument.</summary>
/// <param name="Name">The link's name in the file.</param>
/// <param name="Timeout">Longest wait for a whole answer.</param>
/// <param name="Retries">How often a whole exchange is tried again, 0 or more.</param>
public abstract record Link(string Name, TimeSpan Timeout, int Retries);

/// <summary>A TCP link.</summary>
/// <param name="Name">The link's name in the file.</param>
/// <param name="Host">Host name or address.</param>
/// <param name="Port">TCP port, 1 to 65535.</param>
/// <param name="Timeout">Longest wait for a whole answer.</param>
/// <param name="Retries">How often a whole exchange is tried again.</param>
public sealed record TcpLink(string Name, string Host, int Port, TimeSpan Timeout, int Retries)
    : Link(Name, Timeout, Retries);

/// <summary>A serial link.</summary>
/// <param name="Name">The link's name in the file.</param>
/// <param name="Device">The port, as the operating system names it.</param>
/// <param name="BaudRate">Line rate, bit/s.</param>
/// <param name="Parity">Parity bit.</param>
/// <param name="StopBits">1 or 2.</param>
/// <param name="Timeout">Longest wait for a whole answer.</param>
/// <param name="Retries">How often a whole exchange is tried again.</param>
/// <param name="EchoExpected">Whether the adapter returns each byte sent before the answer.</param>
public sealed record SerialLink(
    string Name, string Device, int BaudRate, LineParity Parity, int StopBits, TimeSpan Timeout, int Retries,
    bool EchoExpected) : Link(Name, Timeout, Retries)
{
    /// <summary>Bits that one character takes on the line: start, eight data bits, parity, stop.</summary>
    public int BitsPerCharacter => 1 + 8 + (Parity == LineParity.None ? 0 : 1) + StopBits;

    /// <summary>Time that one character takes on the line.</summary>
    public TimeSpan CharacterTime => TimeSpan.FromSeconds((double)BitsPerCharacter / BaudRate);
}

/// <summary>Parity of a serial line.</summary>
public enum LineParity
{
    /// <summary>No parity bit.</summary>
    None,

    /// <summary>Even parity.</summary>
    Even,

    /// <summary>Odd parity.</summary>
    Odd,
}
