using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>
/// The relays of one unit that the bench switches. Writes are absolute and cover only coils of this group: coils of the
/// handshake and coils that nobody declared are never written.
/// </summary>
internal sealed class UnitRelays(FixtureUnit unit, IReadOnlyDictionary<Relay, string> names)
{
    private readonly Relay[] relays = [.. names.Keys.OrderBy(relay => relay.Coil)];
    private readonly IReadOnlyList<AddressSpan> writable =
        AddressSpan.Cover(names.Keys.Select(relay => relay.Coil), gapMost: 0, ModbusLimits.WriteCoils);
    private readonly HashSet<ushort> commandedClosed = [];

    public FixtureUnit Unit => unit;

    public IEnumerable<Relay> Closed => relays.Where(relay => commandedClosed.Contains(relay.Coil));

    /// <summary>Whether any mirror contact is wired.</summary>
    public bool HasContacts => relays.Any(relay => relay.ContactInput is not null);

    /// <summary>Commands relays of this unit in as few exchanges as their neighbourhood allows.</summary>
    public async Task CommandAsync(
        IEnumerable<Relay> changed, bool close, Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        ushort[] coils = [.. changed.Select(relay => relay.Coil)];
        foreach (ushort coil in coils)
        {
            _ = close ? commandedClosed.Add(coil) : commandedClosed.Remove(coil);
        }

        foreach (AddressSpan span in writable)
        {
            ushort[] inSpan = [.. coils.Where(coil => coil >= span.First && coil <= span.Last)];
            if (inSpan.Length > 0)
            {
                ushort first = inSpan.Min();
                await between(cancellation);
                await WriteAsync(new(first, inSpan.Max() - first + 1), cancellation);
            }
        }
    }

    /// <summary>Commands every relay open, whatever was commanded before, and reads the coils back.</summary>
    public async Task OpenAllAsync(CancellationToken cancellation)
    {
        commandedClosed.Clear();
        foreach (AddressSpan span in writable)
        {
            await WriteAsync(span, cancellation);
        }

        await ConfirmAsync(FixtureUnit.NothingBetween, cancellation);
    }

    /// <summary>Reads all coils of the group back.</summary>
    /// <exception cref="BenchFaultException">A coil is not as commanded.</exception>
    public async Task ConfirmAsync(Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        IReadOnlyDictionary<ushort, bool> coils =
            await unit.ReadCoilsAsync(relays.Select(relay => relay.Coil), between, cancellation);
        string[] wrong =
        [
            .. relays.Where(relay => coils[relay.Coil] != commandedClosed.Contains(relay.Coil))
                .Select(relay => $"{names[relay]} reads {(coils[relay.Coil] ? "on" : "off")}"),
        ];
        if (wrong.Length > 0)
        {
            throw new BenchFaultException(
                BenchFault.CoilNotConfirmed,
                $"Coils are not as commanded: {string.Join("; ", wrong)}. "
                + "Look at the relay unit's supply, its watchdog and whether another program writes to it.");
        }
    }

    /// <summary>Whether each relay's mirror contact reads closed, where one is wired.</summary>
    public async Task<IReadOnlyList<(Relay Relay, bool Commanded, bool Contact)>> ReadContactsAsync(
        Func<CancellationToken, Task> between, CancellationToken cancellation)
    {
        Relay[] wired = [.. relays.Where(relay => relay.ContactInput is not null)];
        IReadOnlyDictionary<ushort, bool> inputs =
            await unit.ReadInputsAsync(wired.Select(relay => relay.ContactInput!.Value), between, cancellation);
        return
        [
            .. wired.Select(relay =>
                (relay, commandedClosed.Contains(relay.Coil), inputs[relay.ContactInput!.Value])),
        ];
    }

    private Task WriteAsync(AddressSpan span, CancellationToken cancellation) => unit.WriteCoilsAsync(
        span.First,
        [.. Enumerable.Range(span.First, span.Count).Select(coil => commandedClosed.Contains((ushort)coil))],
        cancellation);
}
