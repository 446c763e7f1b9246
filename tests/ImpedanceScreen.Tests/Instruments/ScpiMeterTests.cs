using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Scpi;
using Microsoft.Extensions.Logging.Abstractions;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>A meter over TCP and on a serial line; whatever goes wrong, the next reading is the meter's next.</summary>
[Collection(RealTime.Name)]
public sealed class ScpiMeterTests
{
    private readonly FakeTimeProvider time = new();
    private readonly MeterPeer peer = new();

    public static TheoryData<bool> Links => new() { false, true };

    [Theory]
    [MemberData(nameof(Links))]
    public async Task A_meter_is_identified_and_set_up_before_it_reads(bool serial)
    {
        peer.Terminator = "\r\n";
        await using ScpiMeter meter = MeterOn(serial, out _);
        Assert.Equal(MeterPeer.DefaultIdentity, await time.PumpAsync(meter.StartAsync(CancellationToken.None)));
        await time.PumpAsync(meter.SetRangeAsync(TestBench.TenVolt, CancellationToken.None));
        await time.PumpAsync(meter.SetRangeAsync(TestBench.TenVolt, CancellationToken.None));

        MeterReading reading = await ReadAsync(meter);

        Assert.Equal("+1.00000000E+00", reading.Raw);
        Assert.Equal(1.0, reading.Volt);
        Assert.Equal(ReadingCondition.Valid, reading.Condition);
        string[] sent =
        [
            "*IDN?", "SYST:ERR?", "*CLS", "CONF:VOLT:DC", "SENS:VOLT:DC:NPLC 0.1", "SYST:ERR?",
            "SENS:VOLT:DC:RANG 10", "SYST:ERR?", "READ?",
        ];
        Assert.Equal(sent, peer.Messages);
    }

    [Theory]
    [InlineData("9.9E37", ReadingCondition.Overload)]
    [InlineData("-9.90000000E+37", ReadingCondition.Overload)]
    [InlineData("9.91E37", ReadingCondition.NotANumber)]
    public async Task A_special_value_is_never_a_voltage(string answer, ReadingCondition condition)
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        peer.NextAnswers.Enqueue(answer);
        MeterReading reading = await ReadAsync(meter);
        Assert.Equal(condition, reading.Condition);
        Assert.True(double.IsNaN(reading.Volt));
    }

    [Theory]
    [MemberData(nameof(Links))]
    public async Task After_a_time_out_identity_and_range_come_before_the_next_reading(bool serial)
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial);
        peer.NextAnswers.Enqueue(null);
        Task silent = meter.ReadAsync(1, CancellationToken.None);
        await peer.ReceivedAsync();
        time.Advance(2 * TestLinks.Timeout);
        ScpiException error = await Assert.ThrowsAsync<ScpiException>(() => silent);
        Assert.Equal(ScpiFault.Timeout, error.Fault);
        peer.Messages.Clear();

        Assert.Equal(2.0, (await ReadAsync(meter)).Volt);
        Assert.Equal("*IDN?", peer.Messages[0]);
        Assert.Contains("SENS:VOLT:DC:RANG 10", peer.Messages);
    }

    [Theory]
    [MemberData(nameof(Links))]
    public async Task The_answer_to_a_cancelled_reading_is_never_the_next_reading(bool serial)
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial);
        peer.NextAnswers.Enqueue(null);
        using CancellationTokenSource caller = new();
        Task cancelled = meter.ReadAsync(1, caller.Token);
        await peer.ReceivedAsync();
        await caller.CancelAsync();
        await Assert.ThrowsAnyAsync<OperationCanceledException>(() => cancelled);

        Task<IReadOnlyList<MeterReading>> next = meter.ReadAsync(1, CancellationToken.None);
        if (serial)
        {
            await peer.SendAsync("+7.77000000E+00\n");
        }

        Assert.Equal(2.0, (await time.PumpAsync(next, 10))[0].Volt);
        Assert.Equal(3.0, (await ReadAsync(meter)).Volt);
    }

    [Fact]
    public async Task A_reading_that_comes_after_the_identity_query_is_dropped()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: true);
        peer.NextAnswers.Enqueue(null);
        Task silent = meter.ReadAsync(1, CancellationToken.None);
        await peer.ReceivedAsync();
        time.Advance(2 * TestLinks.Timeout);
        await Assert.ThrowsAsync<ScpiException>(() => silent);

        peer.Identity = $"+7.77000000E+00\n{MeterPeer.DefaultIdentity}";
        Assert.Equal(2.0, (await ReadAsync(meter)).Volt);
    }

    [Fact]
    public async Task Garbage_is_named_and_the_next_reading_works()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        peer.NextAnswers.Enqueue("volts");
        ScpiException error = await Assert.ThrowsAsync<ScpiException>(() => ReadAsync(meter));
        Assert.Equal(ScpiFault.NotNumeric, error.Fault);
        Assert.Equal(2.0, (await ReadAsync(meter)).Volt);
    }

    [Fact]
    public async Task An_endless_line_is_named_and_the_next_reading_works()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        peer.NextAnswers.Enqueue(new string('1', 5 * ScpiSession.LineLength));
        ScpiException error = await Assert.ThrowsAsync<ScpiException>(() => ReadAsync(meter));
        Assert.Equal(ScpiFault.LineTooLong, error.Fault);
        Assert.Equal(2.0, (await ReadAsync(meter)).Volt);
    }

    [Fact]
    public async Task A_repeated_reading_is_a_new_one_on_a_clean_link()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false, retries: 1);
        peer.NextAnswers.Enqueue("volts");
        Assert.Equal(2.0, (await ReadAsync(meter)).Volt);
        Assert.Equal(2, peer.Messages.Count(message => message == "*IDN?"));
    }

    [Fact]
    public async Task Another_meter_is_refused_without_a_second_try()
    {
        peer.Identity = "EXAMPLE,VOLTMETER,9999,1.0";
        await using ScpiMeter meter = MeterOn(serial: false, out _, retries: 3);
        ScpiException error =
            await Assert.ThrowsAsync<ScpiException>(() => meter.StartAsync(CancellationToken.None));
        Assert.Equal(ScpiFault.WrongIdentity, error.Fault);
        Assert.Equal(["*IDN?"], peer.Messages);

        peer.Identity = MeterPeer.DefaultIdentity;
        Assert.Equal(MeterPeer.DefaultIdentity, await time.PumpAsync(meter.StartAsync(CancellationToken.None)));
    }

    [Fact]
    public async Task Errors_in_the_queue_are_read_and_reported()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        peer.Errors.Enqueue("-222,\"Data out of range;VOLT:RANG 2000\"");
        peer.Errors.Enqueue("-410,\"Query INTERRUPTED\"");
        MeterRange other = TestBench.TenVolt with { FullScaleVolt = 0.1 };
        ScpiException error = await Assert.ThrowsAsync<ScpiException>(
            () => time.PumpAsync(meter.SetRangeAsync(other, CancellationToken.None)));
        Assert.Equal(ScpiFault.ErrorReported, error.Fault);
        Assert.Contains("-222", error.Message, StringComparison.Ordinal);
        Assert.Contains("-410", error.Message, StringComparison.Ordinal);

        await time.PumpAsync(meter.SetRangeAsync(other, CancellationToken.None));
        Assert.Equal(1.0, (await ReadAsync(meter)).Volt);
    }

    [Fact]
    public async Task Errors_from_before_the_set_up_are_read_and_hinder_nothing()
    {
        await using ScpiMeter meter = MeterOn(serial: false, out _);
        peer.Errors.Enqueue("-410,\"Query INTERRUPTED\"");
        await time.PumpAsync(meter.StartAsync(CancellationToken.None));

        Assert.Equal(["*IDN?", "SYST:ERR?", "SYST:ERR?", "*CLS"], peer.Messages[..4]);
        Assert.Empty(peer.Errors);
    }

    [Fact]
    public async Task An_error_queue_that_never_ends_is_read_twenty_times()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        for (int i = 0; i < 100; i++)
        {
            peer.Errors.Enqueue("-350,\"Queue overflow\"");
        }

        peer.Messages.Clear();
        MeterRange other = TestBench.TenVolt with { FullScaleVolt = 0.1 };
        await Assert.ThrowsAsync<ScpiException>(
            () => time.PumpAsync(meter.SetRangeAsync(other, CancellationToken.None)));
        Assert.Equal(20, peer.Messages.Count(message => message == "SYST:ERR?"));
    }

    [Fact]
    public async Task Without_a_range_nothing_is_read()
    {
        await using ScpiMeter meter = MeterOn(serial: false, out _);
        await Assert.ThrowsAsync<InvalidOperationException>(() => ReadAsync(meter));
        Assert.DoesNotContain("READ?", peer.Messages);
    }

    [Fact]
    public async Task Readings_of_one_load_point_are_asked_for_in_one_message()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        IReadOnlyList<MeterReading> readings = await time.PumpAsync(meter.ReadAsync(4, CancellationToken.None));

        Assert.Equal([1.0, 2.0, 3.0, 4.0], readings.Select(reading => reading.Volt));
        Assert.Equal("READ?;READ?;READ?;READ?", peer.Messages[^1]);
    }

    [Fact]
    public async Task No_message_asks_for_more_than_a_line_holds()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        IReadOnlyList<MeterReading> readings = await time.PumpAsync(meter.ReadAsync(50, CancellationToken.None), 10);

        Assert.Equal(Enumerable.Range(1, 50), readings.Select(reading => (int)reading.Volt));
        Assert.All(peer.Messages, message => Assert.InRange(message.Length, 1, ScpiSession.LineLength / 2));
    }

    [Fact]
    public async Task Fewer_readings_than_were_asked_for_are_an_error()
    {
        await using ScpiMeter meter = await ReadyMeterAsync(serial: false);
        peer.NextAnswers.Enqueue("+1.0E+00;+2.0E+00");
        ScpiException error = await Assert.ThrowsAsync<ScpiException>(
            () => time.PumpAsync(meter.ReadAsync(3, CancellationToken.None)));
        Assert.Equal(ScpiFault.NotNumeric, error.Fault);
        Assert.Contains("3 readings", error.Message, StringComparison.Ordinal);
    }

    private async Task<MeterReading> ReadAsync(ScpiMeter meter) =>
        (await time.PumpAsync(meter.ReadAsync(1, CancellationToken.None)))[0];

    private async Task<ScpiMeter> ReadyMeterAsync(bool serial, int retries = 0)
    {
        ScpiMeter meter = MeterOn(serial, out _, retries);
        await time.PumpAsync(meter.SetRangeAsync(TestBench.TenVolt, CancellationToken.None));
        return meter;
    }

    private ScpiMeter MeterOn(bool serial, out MemoryChannels channels, int retries = 0)
    {
        Link link = serial ? TestLinks.Serial(retries: retries) : TestLinks.Tcp(retries: retries);
        channels = new MemoryChannels(link, peer.ServeAsync);
        return new ScpiMeter(TestBench.Meter, link, channels, time, NullLogger.Instance);
    }
}
