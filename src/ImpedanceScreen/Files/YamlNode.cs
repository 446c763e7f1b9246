namespace ImpedanceScreen.Files;

/// <summary>One node of a file's tree.</summary>
/// <param name="Mark">Where it begins.</param>
public abstract record YamlNode(Mark Mark);

/// <summary>A single value, as text.</summary>
/// <param name="Text">The text, quotes removed.</param>
/// <param name="IsPlain">Whether it stands without quotes; only then can it be a number, a word or missing.</param>
/// <param name="Mark">Where it begins.</param>
public sealed record YamlScalar(string Text, bool IsPlain, Mark Mark) : YamlNode(Mark)
{
    /// <summary>Whether it says nothing: empty, <c>~</c> or <c>null</c>.</summary>
    public bool IsMissing => Text.Length == 0 || (IsPlain && Text is "~" or "null" or "Null" or "NULL");
}

/// <summary>A list.</summary>
/// <param name="Items">Its items.</param>
/// <param name="Mark">Where it begins.</param>
public sealed record YamlSequence(IReadOnlyList<YamlNode> Items, Mark Mark) : YamlNode(Mark);

/// <summary>A list of keys with values; no key stands twice.</summary>
/// <param name="Entries">The keys in the order of the file.</param>
/// <param name="Mark">Where it begins.</param>
public sealed record YamlMapping(IReadOnlyList<YamlEntry> Entries, Mark Mark) : YamlNode(Mark)
{
    /// <summary>The entry of a key; null where there is none.</summary>
    public YamlEntry? Find(string key) => Entries.FirstOrDefault(entry => entry.Key == key);
}

/// <summary>A node that was refused and already reported: nothing more is to be said about it.</summary>
/// <param name="Mark">Where it begins.</param>
public sealed record YamlRefused(Mark Mark) : YamlNode(Mark);

/// <summary>A key with its value.</summary>
/// <param name="Key">The key.</param>
/// <param name="KeyMark">Where the key begins.</param>
/// <param name="Value">Its value.</param>
public sealed record YamlEntry(string Key, Mark KeyMark, YamlNode Value);
