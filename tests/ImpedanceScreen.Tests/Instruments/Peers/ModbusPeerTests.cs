using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;
using Microsoft.Extensions.Logging.Abstractions;

namespace ImpedanceScreen.Tests.Instruments.Peers;

/// <summary>Our client with servers that others wrote: pymodbus and libmodbus, over TCP and on a serial line.</summary>
[Collection(RealTime.Name)]
public sealed class ModbusPeerTests
{
    private static readonly ChannelFactory Channels = new(TimeProvider.System, NullLogger.Instance);

    [Theory]
    [InlineData("pymodbus")]
    [InlineData("libmodbus")]
    public async Task Over_tcp_a_foreign_server_answers_all_functions(string server)
    {
        int port = PeerProcess.FreePort();
        await using PeerProcess running = await StartAsync(server, "tcp", $"{port}");
        await HoldAsync(TestLinks.Tcp(port));
    }

    [Theory]
    [InlineData("pymodbus")]
    [InlineData("libmodbus")]
    public async Task On_a_serial_line_a_foreign_server_answers_all_functions(string server)
    {
        await using TerminalPair line = await TerminalPair.OpenAsync();
        await using PeerProcess running = await StartAsync(server, "rtu", line.Far);
        await HoldAsync(TestLinks.Serial(line.Near));
    }

    [Fact]
    public async Task A_cut_serial_line_is_lost_by_name_and_found_again()
    {
        SerialLink link;
        await using ModbusPeerOnLine first = await ModbusPeerOnLine.OpenAsync();
        link = TestLinks.Serial(first.Line.Near);
        await using ModbusClient client = TestLinks.Client(link, Channels);
        Assert.Equal([RegisterBank.InitialHolding(7)], await ReadAsync(client, 7));

        await first.Line.CutAsync();
        ModbusException error = await Assert.ThrowsAsync<ModbusException>(() => ReadAsync(client, 7));
        Assert.Equal(ModbusFault.LinkLost, error.Fault);

        await using ModbusPeerOnLine second = await ModbusPeerOnLine.OpenAsync();
        File.Delete(first.Line.Near);
        File.CreateSymbolicLink(first.Line.Near, second.Line.Near);
        Assert.Equal([RegisterBank.InitialHolding(8)], await ReadAsync(client, 8));
    }

    [Fact]
    public async Task A_serial_port_in_use_does_not_open_twice()
    {
        await using TerminalPair line = await TerminalPair.OpenAsync();
        SerialLink link = TestLinks.Serial(line.Near);
        await using (IByteChannel first = await Channels.OpenAsync(link, CancellationToken.None))
        {
            LinkLostException error = await Assert.ThrowsAsync<LinkLostException>(
                () => Channels.OpenAsync(link, CancellationToken.None));
            Assert.Contains("in use", error.Message, StringComparison.Ordinal);
        }

        await using IByteChannel second = await Channels.OpenAsync(link, CancellationToken.None);
        Assert.False(second.IsDead);
    }

    private static async Task HoldAsync(Link link)
    {
        // The server may need a moment from its first line to its first connection.
        await using ModbusClient client = TestLinks.Client(link with { Retries = 8 }, Channels);
        await ModbusConversation.HoldAsync(client, CancellationToken.None);
    }

    private static Task<ushort[]> ReadAsync(ModbusClient client, ushort address) =>
        client.ReadHoldingRegistersAsync(ModbusPeer.Unit, address, 1, CancellationToken.None);

    private static Task<PeerProcess> StartAsync(string server, string kind, string where) => server == "libmodbus"
        ? StartNativeAsync(kind, where)
        : PeerProcess.StartAsync(
            "python3-pymodbus python3-serial-asyncio",
            "/usr/bin/python3",
            Path.Combine(PeerProcess.Folder, "modbus_server.py"),
            kind,
            where);

    private static async Task<PeerProcess> StartNativeAsync(string kind, string where)
    {
        string source = Path.Combine(PeerProcess.Folder, "modbus_server.c");
        string program = Path.Combine(Path.GetTempPath(), $"modbus_server_{Guid.NewGuid():N}");
        await PeerProcess.RunAsync(
            "gcc libc6-dev pkgconf libmodbus-dev",
            "sh",
            "-c",
            "cc -O1 -o \"$0\" \"$1\" $(pkg-config --cflags --libs libmodbus)",
            program,
            source);
        try
        {
            return await PeerProcess.StartAsync("libmodbus-dev", program, kind, where);
        }
        finally
        {
            // The running program keeps its file until it ends.
            File.Delete(program);
        }
    }
}
