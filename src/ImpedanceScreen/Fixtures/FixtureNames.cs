using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>All names and addresses that parts of one fixture file share.</summary>
internal sealed class FixtureNames
{
    private readonly List<Action> later = [];

    internal NameTable Links { get; } = new("link");

    internal NameTable Units { get; } = new("relay unit");

    internal NameTable Banks { get; } = new("load bank");

    internal NameTable Meters { get; } = new("meter");

    internal NameTable Outputs { get; } = new("output");

    internal NameTable Stimuli { get; } = new("stimulus");

    internal NameTable Returns { get; } = new("load return");

    internal AddressTable Coils { get; } = new("coil");

    internal AddressTable Inputs { get; } = new("discrete input");

    internal AddressTable UnitAddresses { get; } = new("unit address");

    /// <summary>Links whose name and time-out were read well.</summary>
    internal Dictionary<string, Link> LinksByName { get; } = new(StringComparer.Ordinal);

    /// <summary>Loads without a contact input, by the name of their bank.</summary>
    internal Dictionary<string, string> LoadsWithoutContact { get; } = new(StringComparer.Ordinal);

    /// <summary>Which instrument uses a link: its path, and whether it is a meter.</summary>
    internal Dictionary<string, (string Path, bool IsMeter)> LinkUsers { get; } = new(StringComparer.Ordinal);

    /// <summary>Where a link leads, as host and port or device, with the path that uses it.</summary>
    internal Dictionary<string, string> Endpoints { get; } = new(StringComparer.Ordinal);

    /// <summary>Reads the mapping <c>inputs</c>; null where it is not there.</summary>
    internal MappingReader? InputsReader { get; set; }

    /// <summary>The poll interval; null where it was not read well.</summary>
    internal TimeSpan? Poll { get; set; }

    /// <summary>A check that needs parts of the file that stand further down.</summary>
    internal void Later(Action check) => later.Add(check);

    /// <summary>Reports every reference that meets no name, then makes the checks that were put off.</summary>
    internal void Check()
    {
        foreach (NameTable table in (NameTable[])[Links, Units, Banks, Meters])
        {
            table.Check();
        }

        later.ForEach(check => check());
    }
}
