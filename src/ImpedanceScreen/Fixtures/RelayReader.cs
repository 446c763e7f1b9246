using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Reads relays and discrete inputs of a fixture file.</summary>
internal static class RelayReader
{
    internal static Relay Relay(MappingReader reader, FixtureNames names)
    {
        string unit = names.Units.Refer(reader, "unit");
        int coil = reader.Integer("coil", 0, ushort.MaxValue);
        int? contact = reader.OptionalInteger("contact_input", 0, ushort.MaxValue);
        names.Coils.Claim(reader, "coil", unit, coil);
        if (contact is not null)
        {
            names.Inputs.Claim(reader, "contact_input", unit, contact.Value);
        }

        return new(unit, (ushort)coil, (ushort?)contact);
    }

    internal static InputPoint Input(MappingReader reader, FixtureNames names)
    {
        string unit = names.Units.Refer(reader, "unit");
        int address = reader.Integer("input", 0, ushort.MaxValue);
        names.Inputs.Claim(reader, "input", unit, address);
        return new(unit, (ushort)address);
    }
}
