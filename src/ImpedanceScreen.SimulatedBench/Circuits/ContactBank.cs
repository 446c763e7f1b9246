using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>All relay contacts of a bench and what they are about to do.</summary>
internal sealed class ContactBank
{
    private readonly Dictionary<(string Unit, ushort Coil), Contact> contacts = [];
    private readonly PriorityQueue<(Contact Contact, bool Closes, int Generation), double> moves = new();
    private readonly HashSet<Contact> commanded = [];

    public ContactBank(FixtureFile fixture, ulong seed)
    {
        Dictionary<string, RelayUnit> units = fixture.RelayUnits.ToDictionary(unit => unit.Name);
        foreach (Relay relay in FixtureRelays.Switching(fixture))
        {
            contacts.TryAdd((relay.Unit, relay.Coil), new Contact(relay, units[relay.Unit], seed));
        }
    }

    /// <summary>Whether the coils have their supply; without it every contact opens.</summary>
    public bool HasCoilSupply { get; private set; } = true;

    /// <summary>When the next contact moves, s; infinity where all are at rest.</summary>
    public double NextMoveSeconds =>
        moves.TryPeek(out _, out double seconds) ? seconds : double.PositiveInfinity;

    public bool IsClosed(Relay relay) => contacts[(relay.Unit, relay.Coil)].IsClosed;

    /// <summary>Commands a coil; coils without a contact in the circuit are passed over.</summary>
    public void Command(string unit, ushort coil, bool on, double nowSeconds)
    {
        if (!contacts.TryGetValue((unit, coil), out Contact? contact))
        {
            return;
        }

        if (on)
        {
            commanded.Add(contact);
        }
        else
        {
            commanded.Remove(contact);
        }

        Drive(contact, on && HasCoilSupply, nowSeconds);
    }

    public void SetCoilSupply(bool on, double nowSeconds)
    {
        HasCoilSupply = on;
        foreach (Contact contact in commanded)
        {
            Drive(contact, on, nowSeconds);
        }
    }

    /// <summary>Carries out the next move.</summary>
    public void MoveNext()
    {
        (Contact contact, bool closes, int generation) = moves.Dequeue();
        if (generation == contact.Generation)
        {
            contact.IsClosed = closes;
        }
    }

    private void Drive(Contact contact, bool on, double nowSeconds)
    {
        if (contact.IsDriven == on)
        {
            return;
        }

        foreach (ContactMove move in contact.Drive(on))
        {
            moves.Enqueue((contact, move.Closes, contact.Generation), nowSeconds + move.AfterSeconds);
        }
    }
}
