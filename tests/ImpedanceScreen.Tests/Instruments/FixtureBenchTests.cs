using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments;
using ImpedanceScreen.Instruments.Modbus;
using Microsoft.Extensions.Logging.Abstractions;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>The bench on its own protocols, with a relay fixture and a meter in this process.</summary>
[Collection(RealTime.Name)]
public sealed class FixtureBenchTests : IAsyncLifetime
{
    private readonly FakeTimeProvider time = new();
    private readonly ModbusPeer relays = new(serial: false);
    private readonly MeterPeer meter = new();
    private readonly MemoryChannels channels = new();
    private readonly List<(TimeSpan At, byte Unit, WriteCoils Write)> writes = [];
    private readonly long startedAt;
    private FixtureBench bench;
    private int exchanges;

    public FixtureBenchTests()
    {
        startedAt = time.GetTimestamp();
        channels.Serve("relays", relays.ServeAsync);
        channels.Serve("meter", meter.ServeAsync);
        relays.Banks[TestBench.SecondUnit] = new RegisterBank();
        foreach ((byte unit, RegisterBank bank) in relays.Banks)
        {
            bank.Seen = request =>
            {
                exchanges++;
                if (request is WriteCoils write)
                {
                    writes.Add((time.GetElapsedTime(startedAt), unit, write));
                }
            };
        }

        // Mirror contacts follow their coils at once.
        First.Wiring = () => First.Coils.AsSpan(0, 2).CopyTo(First.Inputs.AsSpan(20));
        Array.Fill(First.Coils, value: false, 10, 5);
        bench = Bench(TestBench.Fixture);
    }

    private RegisterBank First => relays.Bank;

    private RegisterBank Second => relays.Banks[TestBench.SecondUnit];

    public Task InitializeAsync() => Task.CompletedTask;

    public async Task DisposeAsync() => await bench.DisposeAsync();

    [Fact]
    public async Task At_the_start_all_relays_are_opened_and_nothing_else_is_touched()
    {
        First.Coils[10] = true;
        First.Coils[14] = true;
        bool[] before = [.. First.Coils];
        BenchStart start = await StartAsync();

        Assert.True(start.AllOpen.Confirmed, start.AllOpen.Alarm);
        Assert.Equal(new HandshakeState(SortBin.Pass, Busy: false, Done: true), start.Handshake);
        Assert.Equal(MeterPeer.DefaultIdentity, start.Meters["M1"]);
        Assert.DoesNotContain(true, First.Coils[0..6]);
        Assert.False(First.Coils[8]);
        Assert.DoesNotContain(true, Second.Coils[0..4]);
        Assert.Equal(before[6..8], First.Coils[6..8]);
        Assert.Equal(before[9..], First.Coils[9..]);
    }

    [Fact]
    public async Task A_load_changes_break_before_make()
    {
        await StartAsync();
        await SwitchAsync([], [TestBench.Common, TestBench.Selector1, TestBench.Load1]);
        writes.Clear();
        Switched switched = await SwitchAsync([TestBench.Load1], [TestBench.Load2]);

        Assert.Equal(2, writes.Count);
        Assert.Equal((0, false), (writes[0].Write.Address, writes[0].Write.Values[0]));
        Assert.Equal((1, true), (writes[1].Write.Address, writes[1].Write.Values[0]));
        Assert.InRange(writes[1].At - writes[0].At, TestBench.Release, TimeSpan.FromSeconds(1));
        Assert.Equal(TestBench.Operate, switched.ContactTime);
        Assert.Equal([false, true, true, false], First.Coils[0..4]);
    }

    [Fact]
    public async Task A_relay_opened_by_an_earlier_order_is_waited_for_too()
    {
        await StartAsync();
        await SwitchAsync([], [TestBench.Selector1, TestBench.Load1]);
        Switched opened = await SwitchAsync([TestBench.Load1], []);
        Assert.Equal(TestBench.Release, opened.ContactTime);
        await SwitchAsync([], [TestBench.Load2]);
        Assert.InRange(writes[^1].At - writes[^2].At, TestBench.Release, TimeSpan.FromSeconds(1));
    }

    [Fact]
    public async Task Neighbouring_coils_are_written_in_one_exchange()
    {
        await StartAsync();
        writes.Clear();
        await SwitchAsync([], [TestBench.Load1, TestBench.Selector1, TestBench.Sense1]);
        Assert.IsType<WriteMultipleCoils>(Assert.Single(writes).Write);
        Assert.Equal([true, false, true, false, true, false, false], First.Coils[0..7]);
    }

    public static TheoryData<string, Relay[], Relay[]> Refused => new()
    {
        { "two loads", [], [TestBench.Selector1, TestBench.Load1, TestBench.Load2] },
        { "without the selector", [], [TestBench.Load1] },
        { "two outputs would be connected", [], [TestBench.Selector1, TestBench.Selector2] },
        { "two points", [], [TestBench.Sense1, TestBench.Sense2] },
        { "two points", [], [TestBench.Sense1, TestBench.RailSense] },
        { "two load returns", [], [TestBench.Rail, TestBench.Common] },
        { "opened and closed", [TestBench.Sense1], [TestBench.Sense1] },
        { "no relay that the bench switches", [], [TestBench.Fixture.Handshake!.PassBin] },
        { "no relay that the bench switches", [new("K1", 6, null)], [] },
    };

    [Theory]
    [MemberData(nameof(Refused))]
    public async Task An_order_that_breaks_a_rule_is_refused_before_anything_is_sent(
        string why, Relay[] open, Relay[] close)
    {
        await StartAsync();
        writes.Clear();
        BenchFaultException refusal = await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync(open, close));
        Assert.Equal(BenchFault.OrderRefused, refusal.Fault);
        Assert.Contains(why, refusal.Message, StringComparison.Ordinal);
        Assert.Empty(writes);
        await SwitchAsync([], [TestBench.Sense1]);
    }

    [Fact]
    public async Task A_selector_is_not_opened_under_its_load()
    {
        await StartAsync();
        await SwitchAsync([], [TestBench.Selector1, TestBench.Load1]);
        await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync([TestBench.Selector1], []));
        await SwitchAsync([TestBench.Load1, TestBench.Selector1], []);
        Assert.DoesNotContain(true, First.Coils[0..6]);
    }

    [Fact]
    public async Task Nothing_is_switched_before_all_relays_were_proved_open()
    {
        BenchFaultException refusal =
            await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync([], [TestBench.Sense1]));
        Assert.Equal(BenchFault.OrderRefused, refusal.Fault);
        Assert.Empty(writes);
    }

    [Fact]
    public async Task A_coil_that_does_not_read_back_is_named_and_only_opening_all_is_accepted_then()
    {
        await StartAsync();
        First.Wiring = () => First.Coils[4] = false;
        BenchFaultException fault =
            await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync([], [TestBench.Sense1]));
        Assert.Equal(BenchFault.CoilNotConfirmed, fault.Fault);
        Assert.Contains("sense relay of output 'OUT1'", fault.Message, StringComparison.Ordinal);
        await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync([], [TestBench.Sense2]));

        Assert.True((await OpenAllAsync()).Confirmed);
        First.Wiring = () => { };
        await SwitchAsync([], [TestBench.Sense1]);
    }

    [Fact]
    public async Task Mirror_contacts_are_compared_with_what_is_commanded()
    {
        await StartAsync();
        await SwitchAsync([], [TestBench.Selector1, TestBench.Load1]);
        ContactCheck good = await time.PumpAsync(bench.CheckContactsAsync(NothingBetween, CancellationToken.None));
        Assert.Equal([TestBench.Load1], good.Proved);
        Assert.Empty(good.NotClosed.Concat(good.NotOpen));

        First.Inputs[20] = false;
        First.Inputs[21] = true;
        ContactCheck bad = await time.PumpAsync(bench.CheckContactsAsync(NothingBetween, CancellationToken.None));
        Assert.Equal([TestBench.Load1], bad.NotClosed);
        Assert.Equal([TestBench.Load2], bad.NotOpen);
    }

    [Fact]
    public async Task A_welded_contact_is_an_alarm()
    {
        First.Wiring = () => First.Inputs[21] = true;
        AllOpenOutcome outcome = await OpenAllAsync();
        Assert.False(outcome.Confirmed);
        Assert.Contains("load 'R2' of bank 'bank' (relay unit 'K1', coil 1)", outcome.Alarm, StringComparison.Ordinal);
        await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync([], [TestBench.Sense1]));
    }

    [Fact]
    public async Task All_relays_open_on_a_new_link_where_the_old_one_is_lost()
    {
        await StartAsync();
        await SwitchAsync([], [TestBench.Selector1, TestBench.Load1]);
        relays.Next = Misbehaviour.Reset;
        channels.Refusals = 2;
        Assert.True((await OpenAllAsync()).Confirmed);
        Assert.DoesNotContain(true, First.Coils[0..6]);
    }

    [Fact]
    public async Task A_dead_unit_is_an_alarm_by_name_and_the_others_are_open()
    {
        relays.Dead.Add(TestBench.SecondUnit);
        AllOpenOutcome outcome = await time.PumpAsync(bench.OpenAllAsync(), 20);
        Assert.False(outcome.Confirmed);
        Assert.Contains("'K2'", outcome.Alarm, StringComparison.Ordinal);
        Assert.DoesNotContain("load 'R", outcome.Alarm, StringComparison.Ordinal);
        Assert.DoesNotContain(true, First.Coils[0..6]);

        relays.Dead.Clear();
        Assert.True((await OpenAllAsync()).Confirmed);
    }

    [Fact]
    public async Task A_fixture_that_does_not_answer_is_a_fault_that_says_what_to_look_at()
    {
        await StartAsync();
        relays.Next = Misbehaviour.WrongUnit;
        BenchFaultException fault = await Assert.ThrowsAsync<BenchFaultException>(PollAsync);
        Assert.Equal(BenchFault.FixtureLost, fault.Fault);
        Assert.Contains("'K1'", fault.Message, StringComparison.Ordinal);
        Assert.True((await PollAsync()).BoardPresent);
    }

    [Fact]
    public async Task Inputs_and_temperature_are_read()
    {
        await StartAsync();
        First.Inputs[30] = false;
        First.Inputs[31] = true;
        First.InputRegisters[7] = unchecked((ushort)-2500);
        Assert.Equal(new InputState(BoardPresent: false, InterlockClosed: true), await PollAsync());
        Assert.Equal(-25.0, await time.PumpAsync(bench.ReadTemperatureAsync(CancellationToken.None)));
    }

    [Fact]
    public async Task Polling_keeps_the_watchdogs_of_other_units_quiet_and_notices_a_dropped_coil()
    {
        await StartAsync();
        First.Inputs[31] = true;
        await SwitchAsync([], [TestBench.Supply]);
        time.Advance(TimeSpan.FromSeconds(2));
        Second.Coils[0] = false;
        BenchFaultException fault = await Assert.ThrowsAsync<BenchFaultException>(PollAsync);
        Assert.Equal(BenchFault.CoilNotConfirmed, fault.Fault);
        Assert.Contains("board supply", fault.Message, StringComparison.Ordinal);
        Second.Coils[0] = true;
        Assert.True((await PollAsync()).InterlockClosed);
    }

    [Fact]
    public async Task The_handshake_shows_no_false_state_on_its_way()
    {
        await StartAsync();
        foreach (HandshakeState state in new HandshakeState[]
        {
            new(SortBin.None, Busy: true, Done: false),
            new(SortBin.Pass, Busy: true, Done: true),
            new(SortBin.Fail, Busy: true, Done: true),
            new(SortBin.None, Busy: true, Done: false),
            new(SortBin.None, Busy: false, Done: false),
        })
        {
            await time.PumpAsync(bench.SetHandshakeAsync(state, CancellationToken.None));
            Assert.Equal(state, await time.PumpAsync(bench.ReadHandshakeAsync(CancellationToken.None)));
        }

        // Coil 14 is done, 10 pass, 11 fail, 13 busy.
        (int, bool)[] expected =
        [
            (13, true), (10, true), (14, true), (14, false), (10, false), (11, true), (14, true),
            (14, false), (11, false), (13, false),
        ];
        Assert.Equal(expected, writes.Where(write => write.Write.Address >= 10)
            .Select(write => ((int)write.Write.Address, write.Write.Values[0])));
    }

    [Fact]
    public async Task Opening_all_relays_leaves_the_handshake_alone()
    {
        await StartAsync();
        HandshakeState state = new(SortBin.Retest, Busy: true, Done: true);
        await time.PumpAsync(bench.SetHandshakeAsync(state, CancellationToken.None));
        await OpenAllAsync();
        Assert.Equal(state, await time.PumpAsync(bench.ReadHandshakeAsync(CancellationToken.None)));
    }

    [Fact]
    public async Task Between_any_two_exchanges_of_a_switching_the_inputs_can_be_read()
    {
        await StartAsync();
        int between = 0;
        Task Between(CancellationToken cancellation)
        {
            between++;
            return bench.PollInputsAsync(cancellation);
        }

        int before = exchanges;
        await time.PumpAsync(bench.SwitchAsync(
            new SwitchOrder([], [TestBench.Selector1, TestBench.Sense1, TestBench.Common]), Between, CancellationToken.None));
        await time.PumpAsync(bench.CheckContactsAsync(Between, CancellationToken.None));

        // One call before each exchange, whose own poll is one exchange more.
        Assert.InRange(between, 5, 20);
        Assert.Equal(2 * between, exchanges - before);
    }

    [Fact]
    public async Task A_poll_that_ends_the_attempt_leaves_the_relays_doubtful()
    {
        await StartAsync();
        await Assert.ThrowsAsync<InvalidOperationException>(() => time.PumpAsync(bench.SwitchAsync(
            new SwitchOrder([], [TestBench.Selector1, TestBench.Common]),
            _ => throw new InvalidOperationException("interlock"),
            CancellationToken.None)));
        await Assert.ThrowsAsync<BenchFaultException>(() => SwitchAsync([], [TestBench.Sense1]));
        Assert.True((await OpenAllAsync()).Confirmed);
        await SwitchAsync([], [TestBench.Sense1]);
    }

    [Fact]
    public async Task Without_a_coil_for_it_the_retest_bin_is_no_bin_coil_at_all()
    {
        Handshake two = TestBench.Fixture.Handshake! with { RetestBin = null };
        await bench.DisposeAsync();
        bench = Bench(TestBench.Fixture with { Handshake = two });
        await StartAsync();
        await time.PumpAsync(bench.SetHandshakeAsync(new HandshakeState(SortBin.Retest, true, true), CancellationToken.None));
        Assert.Equal(
            new HandshakeState(SortBin.None, Busy: true, Done: true),
            await time.PumpAsync(bench.ReadHandshakeAsync(CancellationToken.None)));
    }

    [Fact]
    public async Task Two_bin_coils_at_once_are_a_fault()
    {
        await StartAsync();
        First.Coils[10] = true;
        First.Coils[11] = true;
        BenchFaultException fault = await Assert.ThrowsAsync<BenchFaultException>(
            () => bench.ReadHandshakeAsync(CancellationToken.None));
        Assert.Equal(BenchFault.CoilNotConfirmed, fault.Fault);
    }

    [Fact]
    public async Task Meter_faults_are_told_apart()
    {
        await StartAsync();
        await time.PumpAsync(bench.SetRangeAsync(TestBench.Meter, TestBench.TenVolt, CancellationToken.None));
        Assert.Equal(1.0, (await ReadAsync()).Volt);
        meter.NextAnswers.Enqueue("volts");
        Assert.Equal(BenchFault.MeterLost, (await Assert.ThrowsAsync<BenchFaultException>(ReadAsync)).Fault);
        meter.Identity = "EXAMPLE,VOLTMETER,9999,1.0";
        Assert.Equal(BenchFault.MeterChanged, (await Assert.ThrowsAsync<BenchFaultException>(ReadAsync)).Fault);
        meter.Identity = MeterPeer.DefaultIdentity;
        Assert.Equal(3.0, (await ReadAsync()).Volt);
        meter.Errors.Enqueue("-113,\"Undefined header\"");
        MeterRange other = TestBench.TenVolt with { FullScaleVolt = 0.1 };
        BenchFaultException refused = await Assert.ThrowsAsync<BenchFaultException>(
            () => time.PumpAsync(bench.SetRangeAsync(TestBench.Meter, other, CancellationToken.None)));
        Assert.Equal(BenchFault.MeterError, refused.Fault);
    }

    [Fact]
    public async Task Inputs_are_polled_while_a_reading_is_under_way()
    {
        await StartAsync();
        await time.PumpAsync(bench.SetRangeAsync(TestBench.Meter, TestBench.TenVolt, CancellationToken.None));
        meter.NextAnswers.Enqueue(null);
        Task<IReadOnlyList<MeterReading>> reading = bench.ReadAsync(TestBench.Meter, 1, CancellationToken.None);
        await meter.ReceivedAsync();
        Assert.True((await PollAsync()).BoardPresent);
        await meter.SendAsync("+2.5E+00\n");
        Assert.Equal(2.5, (await reading)[0].Volt);
    }

    [Fact]
    public void A_meter_has_a_link_of_its_own()
    {
        FixtureFile shared = TestBench.Fixture with { Meters = [TestBench.Meter with { Link = "relays" }] };
        Assert.Throws<ArgumentException>(() => Bench(shared));
    }

    private static Task NothingBetween(CancellationToken cancellation) => Task.CompletedTask;

    private FixtureBench Bench(FixtureFile fixture) => new(fixture, channels, time, 1, NullLogger.Instance);

    private Task<BenchStart> StartAsync() => time.PumpAsync(bench.StartAsync(CancellationToken.None));

    private Task<AllOpenOutcome> OpenAllAsync() => time.PumpAsync(bench.OpenAllAsync());

    private Task<InputState> PollAsync() => time.PumpAsync(bench.PollInputsAsync(CancellationToken.None));

    private async Task<MeterReading> ReadAsync() =>
        (await time.PumpAsync(bench.ReadAsync(TestBench.Meter, 1, CancellationToken.None)))[0];

    private Task<Switched> SwitchAsync(Relay[] open, Relay[] close) =>
        time.PumpAsync(bench.SwitchAsync(new SwitchOrder(open, close), NothingBetween, CancellationToken.None));
}
