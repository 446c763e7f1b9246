namespace ImpedanceScreen.Files;

/// <summary>
/// Reads the keys of one mapping into typed values and collects what is wrong. A getter that finds a mistake notes it
/// and gives a placeholder (empty, NaN, zero, null), so that one pass finds all mistakes; what was built from
/// placeholders never leaves <see cref="FileBinder"/>. Consistency checks ask <see cref="Bound"/> first.
/// </summary>
public sealed class MappingReader
{
    private readonly YamlMapping mapping;
    private readonly Mark place;
    private readonly MistakeList mistakes;
    private readonly HashSet<string> asked = new(StringComparer.Ordinal);
    private readonly HashSet<string> bound = new(StringComparer.Ordinal);
    private readonly List<string> missing = [];

    // The place is that of the mapping's own key; for the file and for items of a list it is where they begin.
    internal MappingReader(YamlMapping mapping, Mark place, string path, MistakeList mistakes)
    {
        this.mapping = mapping;
        this.place = place;
        this.mistakes = mistakes;
        Path = path;
    }

    /// <summary>Path of this mapping, as <c>outputs[2].states[0]</c>; empty for the file itself.</summary>
    public string Path { get; }

    /// <summary>Whether all these keys are present and were read without a mistake in them or below them.</summary>
    public bool Bound(params ReadOnlySpan<string> keys)
    {
        foreach (string key in keys)
        {
            if (!bound.Contains(key))
            {
                return false;
            }
        }

        return true;
    }

    /// <summary>Whether a key is there with a value, right or wrong.</summary>
    public bool Holds(string key) => mapping.Find(key)?.Value is not (null or YamlScalar { IsMissing: true });

    /// <summary>Notes a mistake at a key of this mapping, or at the mapping where the key is absent.</summary>
    /// <param name="key">The key; empty for the mapping as a whole.</param>
    /// <param name="problem">What is wrong.</param>
    /// <param name="cure">What to do about it.</param>
    public void Mistake(string key, string problem, string cure) =>
        mistakes.Add(mapping.Find(key)?.KeyMark ?? place, PathOf(key), problem, cure);

    /// <summary>Text, taken as it stands: <c>1.10</c> stays 1.10.</summary>
    public string Text(string key) => Scalar(key, true, "", ScalarParser.Text, "write text");

    /// <summary>Text; null where the key is absent.</summary>
    public string? OptionalText(string key) => Scalar<string?>(key, false, null, ScalarParser.Text!, "write text");

    /// <summary>A finite number in the unit that the key names.</summary>
    public double Number(string key, NumberRange range) =>
        InRange(key, range, Scalar(key, true, double.NaN, ScalarParser.Number, NumberCure));

    /// <summary>A finite number; null where the key is absent.</summary>
    public double? OptionalNumber(string key, NumberRange range) =>
        IsPresent(key) ? Number(key, range) : null;

    /// <summary>A number, or the word <c>infinite</c>.</summary>
    public double NumberOrInfinite(string key, NumberRange range)
    {
        bool infinite = mapping.Find(key)?.Value is YamlScalar { Text: "infinite", IsPlain: true };
        return infinite ? Known(key, double.PositiveInfinity) : Number(key, range);
    }

    /// <summary>A whole number.</summary>
    public int Integer(string key, int min, int max)
    {
        int value = Scalar(key, true, min, ScalarParser.Integer, "write a whole number in decimal digits");
        return (int)InRange(key, new(min, max), value);
    }

    /// <summary>A whole number; null where the key is absent.</summary>
    public int? OptionalInteger(string key, int min, int max) => IsPresent(key) ? Integer(key, min, max) : null;

    /// <summary>A time whose key ends in <c>_ms</c> or <c>_s</c>; the range is in that unit.</summary>
    public TimeSpan Duration(string key, NumberRange range)
    {
        ArgumentNullException.ThrowIfNull(key);
        double milliseconds = key switch
        {
            _ when key.EndsWith("_ms", StringComparison.Ordinal) => 1.0,
            _ when key.EndsWith("_s", StringComparison.Ordinal) => 1000.0,
            _ => throw new ArgumentException("A duration's key ends in _ms or _s.", nameof(key)),
        };
        double value = Number(key, range);
        return Bound(key) ? TimeSpan.FromMilliseconds(value * milliseconds) : TimeSpan.Zero;
    }

    /// <summary>A time; null where the key is absent.</summary>
    public TimeSpan? OptionalDuration(string key, NumberRange range) =>
        IsPresent(key) ? Duration(key, range) : null;

    /// <summary>The word true or false; a default where the key is absent.</summary>
    public bool OptionalFlag(string key, bool otherwise) =>
        Scalar(key, false, otherwise, ScalarParser.Flag, "write true or false");

    /// <summary>A date written yyyy-MM-dd.</summary>
    public DateOnly Date(string key) => Scalar<DateOnly>(key, true, default, ScalarParser.Date, "write year-month-day");

    /// <summary>One of a few words.</summary>
    public T Word<T>(string key, params IReadOnlyList<(string Word, T Meaning)> words)
    {
        string written = Text(key);
        foreach ((string word, T meaning) in words)
        {
            if (word == written)
            {
                return meaning;
            }
        }

        if (Bound(key))
        {
            bound.Remove(key);
            string all = string.Join(", ", words.Select(word => word.Word));
            string? nearest = Nearest.To(written, words.Select(word => word.Word));
            Mistake(
                key, $"`{ScalarParser.Shorten(written)}` is none of: {all}",
                nearest is null ? "choose one of them" : $"did you mean `{nearest}`?");
        }

        return words[0].Meaning;
    }

    /// <summary>A mapping below this one; null is given only after a mistake.</summary>
    public T Mapping<T>(string key, Func<MappingReader, T> read) => Nested(key, true, read)!;

    /// <summary>A mapping below this one; null where the key is absent.</summary>
    public T? OptionalMapping<T>(string key, Func<MappingReader, T> read)
        where T : class => Nested(key, false, read);

    /// <summary>A list of mappings.</summary>
    /// <param name="key">The key.</param>
    /// <param name="fewest">How many there must be at least; with 0 the key may be absent.</param>
    /// <param name="read">Reads one.</param>
    public IReadOnlyList<T> Mappings<T>(string key, int fewest, Func<MappingReader, T> read) =>
        Items<T>(key, fewest, (item, path) =>
        {
            if (item is YamlMapping nested)
            {
                return [Read(nested, nested.Mark, path, read)];
            }

            Report(item, path, "is not a mapping", "write its keys as `key: value`");
            return [];
        });

    /// <summary>A list of texts, none twice.</summary>
    /// <param name="key">The key.</param>
    /// <param name="fewest">How many there must be at least; with 0 the key may be absent.</param>
    public IReadOnlyList<string> Texts(string key, int fewest)
    {
        HashSet<string> seen = new(StringComparer.Ordinal);
        return Items<string>(key, fewest, (item, path) =>
        {
            string problem = "is not a single text";
            if (item is YamlScalar { IsMissing: false } scalar
                && ScalarParser.Text(scalar, out string text, out problem))
            {
                if (seen.Add(text))
                {
                    return [text];
                }

                problem = $"`{ScalarParser.Shorten(text)}` stands twice";
            }

            Report(item, path, problem, "write each name once");
            return [];
        });
    }

    /// <summary>
    /// Reports every key that nobody asked for, with the nearest right one, and every missing key that none of them was
    /// meant to be.
    /// </summary>
    internal void Close()
    {
        foreach (YamlEntry entry in mapping.Entries.Where(entry => !asked.Contains(entry.Key)))
        {
            // A key that is there already cannot be what was meant.
            string? nearest = Nearest.To(entry.Key, asked.Where(key => mapping.Find(key) is null))
                ?? Nearest.To(entry.Key, asked);
            string known = string.Join(", ", asked.Order(StringComparer.Ordinal));
            mistakes.Add(
                entry.KeyMark, PathOf(entry.Key), "unknown key",
                nearest is null ? $"known here: {known}" : $"did you mean `{nearest}`?");
            missing.Remove(nearest ?? "");
        }

        missing.ForEach(key => mistakes.Add(mapping.Mark, PathOf(key), "the key is missing", "add it"));
    }

    private const string NumberCure =
        "write a decimal number with a point, as 0.25 or 1.5e-3, without unit or separators";

    private string PathOf(string key) => (Path.Length, key.Length) switch
    {
        (0, _) => key,
        (_, 0) => Path,
        _ => $"{Path}.{key}",
    };

    private bool IsPresent(string key)
    {
        asked.Add(key);
        return Holds(key);
    }

    private T Known<T>(string key, T value)
    {
        asked.Add(key);
        bound.Add(key);
        return value;
    }

    private double InRange(string key, NumberRange range, double value)
    {
        if (Bound(key) && !range.Holds(value))
        {
            bound.Remove(key);
            Mistake(key, $"must be {range}", "correct the value; mind the unit in the key's name");
        }

        return value;
    }

    // The value of a key that is there; null after its absence was reported where it is required.
    private YamlNode? Value(string key, bool required)
    {
        if (IsPresent(key))
        {
            YamlNode value = mapping.Find(key)!.Value;
            if (value is YamlRefused)
            {
                mistakes.LeaveUnread();
            }

            return value;
        }

        if (required && mapping.Find(key) is not null)
        {
            Mistake(key, "the value is missing", "add it");
        }
        else if (required)
        {
            missing.Add(key);
        }

        return null;
    }

    private T Scalar<T>(string key, bool required, T otherwise, ScalarParser.Parse<T> parse, string cure)
    {
        YamlNode? node = Value(key, required);
        if (node is null or YamlRefused)
        {
            return otherwise;
        }

        string problem = "must be a single value";
        if (node is YamlScalar scalar && parse(scalar, out T value, out problem))
        {
            return Known(key, value);
        }

        Mistake(key, problem, cure);
        return otherwise;
    }

    private T? Nested<T>(string key, bool required, Func<MappingReader, T> read)
    {
        YamlNode? node = Value(key, required);
        if (node is YamlMapping nested)
        {
            int before = mistakes.Doubts;
            T value = Read(nested, mapping.Find(key)!.KeyMark, PathOf(key), read);
            return mistakes.Doubts == before ? Known(key, value) : value;
        }

        if (node is not (null or YamlRefused))
        {
            Mistake(key, "must be a mapping", "write its keys as `key: value` below it");
        }

        return default;
    }

    private T Read<T>(YamlMapping nested, Mark at, string path, Func<MappingReader, T> read)
    {
        MappingReader reader = new(nested, at, path, mistakes);
        T value = read(reader);
        reader.Close();
        return value;
    }

    private List<T> Items<T>(string key, int fewest, Func<YamlNode, string, IReadOnlyList<T>> read)
    {
        YamlNode? node = Value(key, required: fewest > 0);
        if (node is not YamlSequence sequence)
        {
            if (node is not (null or YamlRefused))
            {
                Mistake(key, "must be a list", "begin each item with `- `");
            }

            return [];
        }

        int before = mistakes.Doubts;
        List<T> items = [];
        for (int i = 0; i < sequence.Items.Count; i++)
        {
            items.AddRange(read(sequence.Items[i], $"{PathOf(key)}[{i}]"));
        }

        if (sequence.Items.Count < fewest)
        {
            Mistake(key, $"holds {sequence.Items.Count} where at least {fewest} are needed", "add what is missing");
        }

        return mistakes.Doubts == before ? Known(key, items) : items;
    }

    private void Report(YamlNode item, string path, string problem, string cure)
    {
        if (item is YamlRefused)
        {
            mistakes.LeaveUnread();
        }
        else
        {
            mistakes.Add(item.Mark, path, problem, cure);
        }
    }
}
