using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>
/// Silence between frames on a serial line (MODBUS over Serial Line V1.02, 2.5.1.1), under a test's clock.
/// </summary>
[Collection(RealTime.Name)]
public sealed class RtuTimingTests
{
    private readonly FakeTimeProvider time = new();
    private readonly List<TimeSpan> written = [];
    private readonly long start;

    public RtuTimingTests() => start = time.GetTimestamp();

    [Theory]
    [InlineData(9600)]
    [InlineData(115200)]
    public async Task The_next_frame_waits_for_the_silent_interval_after_the_last_byte_in(int baudRate)
    {
        SerialLink link = TestLinks.Serial(baudRate: baudRate);
        await using ModbusClient client = ClientOn(link, new ModbusPeer(serial: true));
        await ReadAsync(client);
        TimeSpan answered = Now();
        Task<bool[]> second = ReadAsync(client);
        Assert.Single(written);

        await time.PumpAsync(second);
        TimeSpan due = RtuTiming.SilentInterval(link);
        Assert.InRange(written[1] - answered, due, due + TimeSpan.FromMilliseconds(1));
    }

    [Fact]
    public async Task After_a_time_out_the_line_is_silent_for_the_longest_answer()
    {
        ModbusPeer peer = new(serial: true) { Next = Misbehaviour.Silence };
        await using ModbusClient client = ClientOn(TestLinks.Serial(), peer);
        Task<bool[]> silent = ReadAsync(client);
        await peer.ReceivedAsync();
        time.Advance(2 * TestLinks.Timeout);
        await Assert.ThrowsAsync<ModbusException>(() => silent);
        TimeSpan timedOut = Now();

        await time.PumpAsync(ReadAsync(client));
        Assert.True(written[1] - timedOut >= TestLinks.LongestAnswer);
    }

    [Fact]
    public async Task The_time_out_begins_when_the_request_is_on_the_line()
    {
        ModbusPeer peer = new(serial: true) { Next = Misbehaviour.Silence };
        SerialLink slow = TestLinks.Serial(baudRate: 300);
        await using ModbusClient client = ClientOn(slow, peer);
        Task<bool[]> silent = ReadAsync(client);
        await peer.ReceivedAsync();

        // A request to read coils has eight characters.
        time.Advance(TestLinks.Timeout + (7 * slow.CharacterTime));
        await peer.SendLateAsync();
        Assert.Equal([RegisterBank.InitialCoil(3)], await silent);
    }

    private static Task<bool[]> ReadAsync(ModbusClient client) =>
        client.ReadCoilsAsync(ModbusPeer.Unit, 3, 1, CancellationToken.None);

    private TimeSpan Now() => time.GetElapsedTime(start);

    private ModbusClient ClientOn(SerialLink link, ModbusPeer peer)
    {
        MemoryChannels channels = new(link, peer.ServeAsync)
        {
            Wrap = channel => new WatchedChannel(channel, () => written.Add(Now())),
        };
        return TestLinks.Client(link, channels, time);
    }

    private sealed class WatchedChannel(IByteChannel inner, Action onWrite) : IByteChannel
    {
        public bool IsDead => inner.IsDead;

        public ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellation) =>
            inner.ReadAsync(buffer, cancellation);

        public ValueTask WriteAsync(ReadOnlyMemory<byte> bytes, CancellationToken cancellation)
        {
            onWrite();
            return inner.WriteAsync(bytes, cancellation);
        }

        public void DiscardReceived() => inner.DiscardReceived();

        public ValueTask DisposeAsync() => inner.DisposeAsync();
    }
}
