using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>A peer misbehaves; the exchange fails by name, and the next one works.</summary>
[Collection(RealTime.Name)]
public sealed class ModbusFaultTests
{
    private readonly FakeTimeProvider time = new();

    public static TheoryData<bool, Misbehaviour, ModbusFault> Faults => new()
    {
        { false, Misbehaviour.WrongUnit, ModbusFault.WrongUnit },
        { false, Misbehaviour.WrongFunction, ModbusFault.WrongFunction },
        { false, Misbehaviour.WrongLength, ModbusFault.WrongLength },
        { false, Misbehaviour.WrongTransaction, ModbusFault.WrongTransaction },
        { false, Misbehaviour.Reset, ModbusFault.LinkLost },
        { false, Misbehaviour.Silence, ModbusFault.Timeout },
        { false, Misbehaviour.Truncated, ModbusFault.Timeout },
        { true, Misbehaviour.WrongUnit, ModbusFault.WrongUnit },
        { true, Misbehaviour.WrongFunction, ModbusFault.WrongFunction },
        { true, Misbehaviour.WrongLength, ModbusFault.WrongLength },
        { true, Misbehaviour.WrongChecksum, ModbusFault.WrongChecksum },
        { true, Misbehaviour.Extended, ModbusFault.WrongLength },
        { true, Misbehaviour.Reset, ModbusFault.LinkLost },
        { true, Misbehaviour.Silence, ModbusFault.Timeout },
        { true, Misbehaviour.Truncated, ModbusFault.Timeout },
    };

    [Theory]
    [MemberData(nameof(Faults))]
    public async Task A_fault_has_its_name_and_the_next_exchange_works(
        bool serial, Misbehaviour misbehaviour, ModbusFault fault)
    {
        ModbusPeer peer = new(serial);
        Link link = serial ? TestLinks.Serial() : TestLinks.Tcp();
        MemoryChannels channels = new(link, peer.ServeAsync);
        await using ModbusClient client = TestLinks.Client(link, channels, time);

        peer.Next = misbehaviour;
        Task<ushort[]> failing = ReadAsync(client, 7);
        await peer.ReceivedAsync();
        if (fault == ModbusFault.Timeout)
        {
            time.Advance(2 * TestLinks.Timeout);
        }

        ModbusException error = await Assert.ThrowsAsync<ModbusException>(() => time.PumpAsync(failing));
        Assert.Equal(fault, error.Fault);
        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
    }

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public async Task An_answer_in_pieces_is_put_together(bool serial)
    {
        ModbusPeer peer = new(serial) { Next = Misbehaviour.InPieces };
        Link link = serial ? TestLinks.Serial() : TestLinks.Tcp();
        await using ModbusClient client = TestLinks.Client(link, new MemoryChannels(link, peer.ServeAsync), time);

        Assert.Equal([RegisterBank.InitialHolding(7)], await time.PumpAsync(ReadAsync(client, 7)));
        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
    }

    [Fact]
    public async Task On_a_serial_line_a_late_answer_is_never_taken_for_the_next()
    {
        ModbusPeer peer = new(serial: true) { Next = Misbehaviour.Silence };
        SerialLink link = TestLinks.Serial();
        await using ModbusClient client = TestLinks.Client(link, new MemoryChannels(link, peer.ServeAsync), time);
        Task<ushort[]> late = ReadAsync(client, 7);
        await peer.ReceivedAsync();
        time.Advance(2 * TestLinks.Timeout);
        await Assert.ThrowsAsync<ModbusException>(() => late);

        // The same function and length, so that the late frame looks like the answer to what is asked next.
        Task<ushort[]> next = ReadAsync(client, 8);
        time.Advance(TestLinks.LongestAnswer / 2);
        await peer.SendLateAsync();

        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(next));
        Assert.Equal([RegisterBank.InitialHolding(9)], await time.PumpAsync(ReadAsync(client, 9)));
    }

    [Fact]
    public async Task Over_tcp_a_late_answer_to_a_cancelled_request_is_dropped()
    {
        ModbusPeer peer = new(serial: false) { Next = Misbehaviour.Silence };
        TcpLink link = TestLinks.Tcp();
        MemoryChannels channels = new(link, peer.ServeAsync);
        await using ModbusClient client = TestLinks.Client(link, channels, time);
        using CancellationTokenSource caller = new();
        Task<ushort[]> cancelled =
            client.ReadHoldingRegistersAsync(ModbusPeer.Unit, 7, 1, caller.Token);
        await peer.ReceivedAsync();
        await caller.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => cancelled);
        await peer.SendLateAsync();

        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
        Assert.Equal(1, channels.Opened);
    }

    [Fact]
    public async Task After_a_time_out_over_tcp_the_connection_is_a_new_one()
    {
        ModbusPeer peer = new(serial: false) { Next = Misbehaviour.Silence };
        TcpLink link = TestLinks.Tcp();
        MemoryChannels channels = new(link, peer.ServeAsync);
        await using ModbusClient client = TestLinks.Client(link, channels, time);
        Task<ushort[]> silent = ReadAsync(client, 7);
        await peer.ReceivedAsync();
        time.Advance(2 * TestLinks.Timeout);
        await Assert.ThrowsAsync<ModbusException>(() => silent);

        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
        Assert.Equal(2, channels.Opened);
    }

    [Fact]
    public async Task Two_time_outs_in_a_row_reopen_a_serial_port()
    {
        ModbusPeer peer = new(serial: true);
        SerialLink link = TestLinks.Serial();
        MemoryChannels channels = new(link, peer.ServeAsync);
        await using ModbusClient client = TestLinks.Client(link, channels, time);
        peer.Dead.Add(ModbusPeer.Unit);
        foreach (int opened in new[] { 1, 1 })
        {
            Task<ushort[]> silent = ReadAsync(client, 7);
            await time.PumpAsync(peer.ReceivedAsync());
            time.Advance(2 * TestLinks.Timeout);
            await Assert.ThrowsAsync<ModbusException>(() => silent);
            Assert.Equal(opened, channels.Opened);
        }

        peer.Dead.Clear();
        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
        Assert.Equal(2, channels.Opened);
    }

    [Fact]
    public async Task A_failed_exchange_is_tried_again_as_often_as_the_link_says()
    {
        ModbusPeer peer = new(serial: false) { Next = Misbehaviour.WrongUnit };
        TcpLink link = TestLinks.Tcp(retries: 1);
        MemoryChannels channels = new(link, peer.ServeAsync);
        await using ModbusClient client = TestLinks.Client(link, channels, time);
        Assert.Equal([RegisterBank.InitialHolding(7)], await time.PumpAsync(ReadAsync(client, 7)));

        channels.Refusals = 2;
        await client.ReopenAsync();
        ModbusException error = await Assert.ThrowsAsync<ModbusException>(() => time.PumpAsync(ReadAsync(client, 7)));
        Assert.Equal(ModbusFault.LinkLost, error.Fault);
        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
    }

    [Theory]
    [InlineData(false)]
    [InlineData(true)]
    public async Task A_link_that_does_not_open_is_lost_by_name_and_opens_the_next_time(bool serial)
    {
        ModbusPeer peer = new(serial);
        Link link = serial ? TestLinks.Serial() : TestLinks.Tcp();
        MemoryChannels channels = new(link, peer.ServeAsync) { Refusals = 1 };
        await using ModbusClient client = TestLinks.Client(link, channels, time);
        ModbusException error = await Assert.ThrowsAsync<ModbusException>(() => ReadAsync(client, 7));
        Assert.Equal(ModbusFault.LinkLost, error.Fault);
        Assert.Equal([RegisterBank.InitialHolding(8)], await time.PumpAsync(ReadAsync(client, 8)));
    }

    [Fact]
    public async Task An_exception_reply_is_a_refusal_and_is_not_tried_again()
    {
        ModbusPeer peer = new(serial: false);
        TcpLink link = TestLinks.Tcp(retries: 3);
        await using ModbusClient client = TestLinks.Client(link, new MemoryChannels(link, peer.ServeAsync), time);
        int requests = 0;
        peer.Bank.Seen = _ => requests++;

        ModbusRefusalException refusal = await Assert.ThrowsAsync<ModbusRefusalException>(
            () => client.ReadCoilsAsync(ModbusPeer.Unit, RegisterBank.Size, 1, CancellationToken.None));

        Assert.Equal(ModbusExceptionCode.IllegalDataAddress, refusal.Code);
        Assert.Equal(1, requests);
        Assert.Equal([RegisterBank.InitialHolding(8)], await ReadAsync(client, 8));
    }

    [Theory]
    [InlineData(0)]
    [InlineData(248)]
    [InlineData(255)]
    public async Task Broadcast_and_reserved_unit_addresses_are_refused(byte unit)
    {
        ModbusPeer peer = new(serial: true);
        SerialLink link = TestLinks.Serial();
        MemoryChannels channels = new(link, peer.ServeAsync);
        await using ModbusClient client = TestLinks.Client(link, channels, time);

        await Assert.ThrowsAsync<ArgumentOutOfRangeException>(
            () => client.WriteSingleCoilAsync(unit, 1, value: true, CancellationToken.None));
        Assert.Equal(0, channels.Opened);
    }

    [Fact]
    public async Task An_echoing_adapter_is_read_back_and_another_sender_is_a_collision()
    {
        ModbusPeer echoing = new(serial: true, echo: true);
        SerialLink link = TestLinks.Serial(echo: true);
        await using ModbusClient client = TestLinks.Client(link, new MemoryChannels(link, echoing.ServeAsync), time);
        Assert.Equal([RegisterBank.InitialHolding(7)], await time.PumpAsync(ReadAsync(client, 7)));

        ModbusPeer silent = new(serial: true);
        await using ModbusClient other = TestLinks.Client(link, new MemoryChannels(link, silent.ServeAsync), time);
        ModbusException error = await Assert.ThrowsAsync<ModbusException>(() => time.PumpAsync(
            other.ReadHoldingRegistersAsync(ModbusPeer.Unit, 7, 5, CancellationToken.None)));
        Assert.Equal(ModbusFault.Collision, error.Fault);
    }

    [Fact]
    public async Task Callers_at_the_same_time_wait_their_turn()
    {
        ModbusPeer peer = new(serial: false);
        TcpLink link = TestLinks.Tcp();
        await using ModbusClient client = TestLinks.Client(link, new MemoryChannels(link, peer.ServeAsync), time);

        ushort[][] answers = await Task.WhenAll(Enumerable.Range(0, 50).Select(i => ReadAsync(client, (ushort)i)));

        Assert.Equal(Enumerable.Range(0, 50).Select(RegisterBank.InitialHolding), answers.Select(answer => answer[0]));
    }

    private static Task<ushort[]> ReadAsync(ModbusClient client, ushort address) =>
        client.ReadHoldingRegistersAsync(ModbusPeer.Unit, address, 1, CancellationToken.None);
}
