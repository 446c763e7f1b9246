using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>Links for tests: time-outs far longer than any test, so that only a fault that is made can end an exchange.</summary>
internal static class TestLinks
{
    public static readonly TimeSpan Timeout = TimeSpan.FromSeconds(10);
    public static readonly TimeSpan LongestAnswer = TimeSpan.FromMilliseconds(50);

    public static TcpLink Tcp(int port = 502, int retries = 0) => new("tcp", "127.0.0.1", port, Timeout, retries);

    public static SerialLink Serial(
        string device = "memory", int baudRate = 115200, int retries = 0, bool echo = false) =>
        new("serial", device, baudRate, LineParity.None, 1, Timeout, retries, echo);

    public static ModbusClient Client(Link link, IChannelFactory channels, TimeProvider? time = null) =>
        new(link, _ => LongestAnswer, channels, time ?? TimeProvider.System, NullLogger.Instance);
}
