using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.Instruments.Relays;
using ImpedanceScreen.Instruments.Scpi;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments;

/// <summary>The bench of a fixture file over its links: relay units by Modbus, meters by SCPI.</summary>
public sealed class FixtureBench : IBench
{
    private readonly Dictionary<string, IModbusClient> clients;
    private readonly Dictionary<string, FixtureUnit> units;
    private readonly Dictionary<string, ScpiMeter> meters;
    private readonly RelayFixture relays;
    private readonly InputReader inputs;
    private readonly HandshakeCoils? handshake;
    private readonly FixtureFile fixture;

    /// <summary>Makes the bench; links are opened when first used.</summary>
    /// <param name="fixture">The fixture file.</param>
    /// <param name="channels">Opens channels.</param>
    /// <param name="time">Clock.</param>
    /// <param name="timeScale">
    /// Factor on operate and release times, 1 for a real bench; a simulated bench that runs ten times as fast takes
    /// 0.1. Time-outs are never scaled.
    /// </param>
    /// <param name="log">Log.</param>
    /// <exception cref="ArgumentException">A unit or meter names no link, or shares the link of another
    /// instrument.</exception>
    public FixtureBench(
        FixtureFile fixture, IChannelFactory channels, TimeProvider time, double timeScale, ILogger log)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(timeScale);
        this.fixture = fixture;
        BenchLinks.Check(fixture);
        Dictionary<string, Link> links = fixture.Links.ToDictionary(link => link.Name);
        clients = fixture.RelayUnits.GroupBy(unit => unit.Link).ToDictionary(
            ofLink => ofLink.Key,
            ofLink => (IModbusClient)new ModbusClient(
                links[ofLink.Key], BenchLinks.LongestAnswers([.. ofLink]), channels, time, log));
        units = fixture.RelayUnits.ToDictionary(
            unit => unit.Name, unit => new FixtureUnit(unit, links[unit.Link], clients[unit.Link], time));
        meters = fixture.Meters.ToDictionary(
            meter => meter.Name, meter => new ScpiMeter(meter, links[meter.Link], channels, time, log));
        relays = new RelayFixture(fixture, units, time, timeScale);
        inputs = new InputReader(fixture.Inputs, units);
        handshake = fixture.Handshake is { } coils ? new HandshakeCoils(coils, units) : null;
    }

    private HandshakeCoils Handshake => handshake
        ?? throw new InvalidOperationException($"Fixture '{fixture.Name}' has no handshake.");

    /// <inheritdoc/>
    public async Task<BenchStart> StartAsync(CancellationToken cancellation)
    {
        HandshakeState? found = null;
        BenchFaultException? handshakeFault = null;
        try
        {
            found = handshake is null ? null : await handshake.ReadAsync(cancellation);
        }
        catch (BenchFaultException e)
        {
            // The relays come first; what the handshake says is of no use while they may be closed.
            handshakeFault = e;
        }

        AllOpenOutcome allOpen = await OpenAllAsync();
        Dictionary<string, string> identities = [];
        if (!allOpen.Confirmed)
        {
            return new BenchStart(allOpen, found, identities);
        }

        if (handshakeFault is not null)
        {
            throw handshakeFault;
        }

        foreach (Meter meter in fixture.Meters)
        {
            identities[meter.Name] = await AskAsync(meter, it => it.StartAsync(cancellation));
        }

        return new BenchStart(allOpen, found, identities);
    }

    /// <inheritdoc/>
    public async Task<InputState> PollInputsAsync(CancellationToken cancellation)
    {
        InputState state = await inputs.ReadAsync(cancellation);
        if (state.InterlockClosed)
        {
            // A broken interlock is reported first; what the watchdogs drop then is to be opened anyway.
            await relays.KeepAliveAsync(cancellation);
            await (handshake?.KeepAliveAsync(cancellation) ?? Task.CompletedTask);
        }

        return state;
    }

    /// <inheritdoc/>
    public Task<Switched> SwitchAsync(
        SwitchOrder order, Func<CancellationToken, Task> between, CancellationToken cancellation) =>
        relays.SwitchAsync(order, between, cancellation);

    /// <inheritdoc/>
    public Task<ContactCheck> CheckContactsAsync(
        Func<CancellationToken, Task> between, CancellationToken cancellation) =>
        relays.CheckContactsAsync(between, cancellation);

    /// <inheritdoc/>
    public Task SetRangeAsync(Meter meter, MeterRange range, CancellationToken cancellation) => AskAsync(
        meter,
        async it =>
        {
            await it.SetRangeAsync(range, cancellation);
            return true;
        });

    /// <inheritdoc/>
    public Task<IReadOnlyList<MeterReading>> ReadAsync(Meter meter, int count, CancellationToken cancellation) =>
        AskAsync(meter, it => it.ReadAsync(count, cancellation));

    /// <inheritdoc/>
    public async Task<double?> ReadTemperatureAsync(CancellationToken cancellation) =>
        fixture.TemperatureSensor is { } sensor
            ? sensor.DegCPerCount
                * (short)await units[sensor.Unit].ReadInputRegisterAsync(sensor.Register, cancellation)
            : null;

    /// <inheritdoc/>
    public Task<AllOpenOutcome> OpenAllAsync() => relays.OpenAllAsync();

    /// <inheritdoc/>
    public Task<HandshakeState> ReadHandshakeAsync(CancellationToken cancellation) => Handshake.ReadAsync(cancellation);

    /// <inheritdoc/>
    public Task SetHandshakeAsync(HandshakeState state, CancellationToken cancellation) =>
        Handshake.SetAsync(state, cancellation);

    /// <summary>Closes the links. Sends nothing: relays stay as they are.</summary>
    public async ValueTask DisposeAsync()
    {
        foreach (IAsyncDisposable instrument in clients.Values.Concat<IAsyncDisposable>(meters.Values))
        {
            await instrument.DisposeAsync();
        }
    }

    private async Task<T> AskAsync<T>(Meter meter, Func<ScpiMeter, Task<T>> ask)
    {
        ArgumentNullException.ThrowIfNull(meter);
        try
        {
            return await ask(meters[meter.Name]);
        }
        catch (ScpiException e)
        {
            (BenchFault fault, string cure) = e.Fault switch
            {
                ScpiFault.WrongIdentity =>
                    (BenchFault.MeterChanged, "Connect the meter whose calibration the fixture file states."),
                ScpiFault.ErrorReported =>
                    (BenchFault.MeterError, "Look at the meter's display and at its range and integration time."),
                _ => (BenchFault.MeterLost, "Look at its power, its cable and its interface settings."),
            };
            throw new BenchFaultException(
                fault, $"Meter '{meter.Name}' on link '{meter.Link}': {e.Message} {cure}", e);
        }
    }
}
