namespace ImpedanceScreen.Files;

/// <summary>
/// Names that one part of a file gives and other parts refer to. References are checked when all names are known; where
/// the reading of a name failed they are not, since the one that is missing may be the one meant.
/// </summary>
/// <param name="what">What is named, for messages.</param>
public sealed class NameTable(string what)
{
    private readonly Dictionary<string, string> declared = new(StringComparer.Ordinal);
    private readonly List<(MappingReader Reader, string Key, string Name)> references = [];
    private bool incomplete;

    /// <summary>Reads the key <c>name</c> as a new name; a second one of the same name is a mistake.</summary>
    public string Declare(MappingReader reader)
    {
        ArgumentNullException.ThrowIfNull(reader);
        string name = reader.Text("name");
        if (!reader.Bound("name"))
        {
            incomplete = true;
        }
        else if (!declared.TryAdd(name, reader.Path))
        {
            // One of the two was meant to be another name.
            incomplete = true;
            reader.Mistake(
                "name", $"the {what} `{name}` is there already, at {declared[name]}", "give each a name of its own");
        }

        return name;
    }

    /// <summary>Reads a key whose value is one of these names.</summary>
    public string Refer(MappingReader reader, string key)
    {
        ArgumentNullException.ThrowIfNull(reader);
        string name = reader.Text(key);
        if (reader.Bound(key))
        {
            references.Add((reader, key, name));
        }

        return name;
    }

    /// <summary>Reports the references that meet no name.</summary>
    public void Check()
    {
        if (incomplete || declared.Count == 0)
        {
            return;
        }

        foreach ((MappingReader reader, string key, string name) in references)
        {
            if (declared.ContainsKey(name))
            {
                continue;
            }

            reader.Mistake(key, $"there is no {what} `{ScalarParser.Shorten(name)}`", Cure(name, declared.Keys));
        }
    }

    /// <summary>What to do about a name that is not there.</summary>
    internal static string Cure(string name, IEnumerable<string> known) => Nearest.To(name, known) is { } nearest
        ? $"did you mean `{nearest}`?"
        : $"choose one of: {string.Join(", ", known)}";
}
