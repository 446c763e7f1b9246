using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Bench;

/// <summary>
/// A bench: relay fixture, meters and inputs. One caller at a time for relays and inputs; a reading may be under way
/// beside them, since meters have links of their own. Every operation has its own time-out and throws
/// <see cref="BenchFaultException"/> when the bench does not do as told.
/// </summary>
public interface IBench : IAsyncDisposable
{
    /// <summary>
    /// Opens the links, reads the handshake coils back without touching them, opens every load, selector, sense and
    /// stimulus relay, then identifies and sets up the meters. Nothing is written before the relays are open.
    /// </summary>
    Task<BenchStart> StartAsync(CancellationToken cancellation);

    /// <summary>Reads board-present and interlock.</summary>
    Task<InputState> PollInputsAsync(CancellationToken cancellation);

    /// <summary>
    /// Switches relays: opens first, waits their release time, closes then, and reads the coils back. Returns when the
    /// last coil is acknowledged and confirmed; the contact is at rest only after <see cref="Switched.ContactTime"/> more.
    /// </summary>
    /// <param name="order">What is to open and close.</param>
    /// <param name="between">
    /// Called before each exchange, so that a slow switching does not keep the inputs from being read. What it throws
    /// ends the switching, and then only opening all relays is accepted.
    /// </param>
    /// <param name="cancellation">Ends it early, with the same effect.</param>
    Task<Switched> SwitchAsync(
        SwitchOrder order, Func<CancellationToken, Task> between, CancellationToken cancellation);

    /// <summary>
    /// Reads the mirror contacts that are wired and compares them with what is commanded; call it when the contacts
    /// are at rest.
    /// </summary>
    /// <param name="between">Called before each exchange.</param>
    /// <param name="cancellation">Ends it early.</param>
    Task<ContactCheck> CheckContactsAsync(Func<CancellationToken, Task> between, CancellationToken cancellation);

    /// <summary>Sets the meter to one DC-volts range; does nothing where it is set so already.</summary>
    Task SetRangeAsync(Meter meter, MeterRange range, CancellationToken cancellation);

    /// <summary>
    /// Takes readings one right after another. When cancelled or timed out the meter's link is dirty: the next use
    /// drains
    /// or reopens it and asks for the identity first.
    /// </summary>
    Task<IReadOnlyList<MeterReading>> ReadAsync(Meter meter, int count, CancellationToken cancellation);

    /// <summary>Reads the temperature beside the loads, °C; null where there is no sensor.</summary>
    Task<double?> ReadTemperatureAsync(CancellationToken cancellation);

    /// <summary>
    /// Opens every load, selector, sense, stimulus, return and supply relay. Has its own deadline, opens a new link
    /// where the old one is
    /// doubtful, tries until confirmed by reading back, and reports an alarm rather than throw.
    /// </summary>
    Task<AllOpenOutcome> OpenAllAsync();

    /// <summary>Reads sort, busy and done coils back.</summary>
    /// <exception cref="InvalidOperationException">The fixture has no handshake.</exception>
    Task<HandshakeState> ReadHandshakeAsync(CancellationToken cancellation);

    /// <summary>Sets sort, busy and done coils to exactly this and reads them back.</summary>
    /// <exception cref="InvalidOperationException">The fixture has no handshake.</exception>
    Task SetHandshakeAsync(HandshakeState state, CancellationToken cancellation);
}

/// <summary>What the start of a bench found.</summary>
/// <param name="AllOpen">Whether all relays were proved open.</param>
/// <param name="Handshake">The handshake coils as found, before anything was switched; null where there are
/// none.</param>
/// <param name="Meters">The identity of each meter by its name in the fixture file.</param>
public sealed record BenchStart(
    AllOpenOutcome AllOpen, HandshakeState? Handshake, IReadOnlyDictionary<string, string> Meters);

/// <summary>The discrete inputs.</summary>
/// <param name="BoardPresent">Whether a board is in the nest; true where no such input is wired.</param>
/// <param name="InterlockClosed">Whether the interlock is closed.</param>
public readonly record struct InputState(bool BoardPresent, bool InterlockClosed);

/// <summary>What is to be switched, break before make.</summary>
/// <param name="Open">Relays to open first.</param>
/// <param name="Close">Relays to close then.</param>
public sealed record SwitchOrder(IReadOnlyList<Relay> Open, IReadOnlyList<Relay> Close);

/// <summary>A switching that was acknowledged and whose coils were read back as commanded.</summary>
/// <param name="AcknowledgedTimestamp">Time-provider timestamp at the last coil's acknowledgement.</param>
/// <param name="ContactTime">Longest declared operate or release time of what was switched last, shortened by the
/// time scale of a simulated bench.</param>
public readonly record struct Switched(long AcknowledgedTimestamp, TimeSpan ContactTime);

/// <summary>Mirror contacts against commands.</summary>
/// <param name="Proved">Relays commanded closed whose contact reads closed.</param>
/// <param name="NotClosed">Relays commanded closed whose contact reads open.</param>
/// <param name="NotOpen">Relays commanded open whose contact reads closed.</param>
public sealed record ContactCheck(
    IReadOnlyList<Relay> Proved, IReadOnlyList<Relay> NotClosed, IReadOnlyList<Relay> NotOpen);

/// <summary>How opening all relays ended.</summary>
/// <param name="Confirmed">Every coil was read back as off (and every wired contact as open).</param>
/// <param name="Alarm">What could not be confirmed, for a person; empty when confirmed.</param>
public sealed record AllOpenOutcome(bool Confirmed, string Alarm);

/// <summary>Where a board is told to go.</summary>
public enum SortBin
{
    /// <summary>No bin coil set.</summary>
    None,

    /// <summary>Pass bin.</summary>
    Pass,

    /// <summary>Fail bin.</summary>
    Fail,

    /// <summary>Retest bin.</summary>
    Retest,
}

/// <summary>Handshake coils.</summary>
/// <param name="Bin">The bin coil that is on.</param>
/// <param name="Busy">Busy coil.</param>
/// <param name="Done">Done coil.</param>
public readonly record struct HandshakeState(SortBin Bin, bool Busy, bool Done);
