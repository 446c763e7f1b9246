using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>All names and addresses that parts of one fixture file share.</summary>
internal sealed class FixtureNames
{
    internal NameTable Links { get; } = new("link");

    internal NameTable Units { get; } = new("relay unit");

    internal NameTable Banks { get; } = new("load bank");

    internal NameTable Loads { get; } = new("load");

    internal NameTable Meters { get; } = new("meter");

    internal NameTable Outputs { get; } = new("output");

    internal NameTable Stimuli { get; } = new("stimulus");

    internal NameTable Returns { get; } = new("load return");

    internal AddressTable Coils { get; } = new("coil");

    internal AddressTable Inputs { get; } = new("discrete input");

    /// <summary>Reports every reference that meets no name.</summary>
    internal void Check()
    {
        foreach (NameTable table in (NameTable[])[Links, Units, Banks, Meters])
        {
            table.Check();
        }
    }
}
