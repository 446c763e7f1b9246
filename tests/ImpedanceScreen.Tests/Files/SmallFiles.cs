using ImpedanceScreen.Files;

namespace ImpedanceScreen.Tests.Files;

/// <summary>Two small files without a mistake, and edits that put mistakes into them.</summary>
internal static class SmallFiles
{
    internal const string LimitsName = "small-limits.yaml";
    internal const string FixtureName = "small-fixture.yaml";

    internal static string LimitsText { get; } = Read(LimitsName);

    internal static string FixtureText { get; } = Read(FixtureName);

    internal static FileText Limits(string find = "", string replace = "") =>
        new(LimitsName, Edit(LimitsText, find, replace));

    internal static FileText Fixture(string find = "", string replace = "") =>
        new(FixtureName, Edit(FixtureText, find, replace));

    /// <summary>Replaces the first place where a text stands; it must stand somewhere.</summary>
    internal static string Edit(string text, string find, string replace)
    {
        if (find.Length == 0)
        {
            return replace + text;
        }

        int at = text.IndexOf(find, StringComparison.Ordinal);
        Assert.True(at >= 0, $"The base text has no `{find}`.");
        return string.Concat(text.AsSpan(0, at), replace, text.AsSpan(at + find.Length));
    }

    /// <summary>Exactly one mistake, at this place, about this key, with these words.</summary>
    internal static void AssertOne(
        IReadOnlyList<Mistake> mistakes, FileText file, int line, int column, string key, string words)
    {
        string found = string.Join("\n", mistakes);
        string subject = key.Length == 0 ? "file" : key;
        Assert.StartsWith($"{file.Name}:{line}:{column}: {subject}: ", found, StringComparison.Ordinal);
        Assert.Contains(words, found, StringComparison.Ordinal);
        Assert.Single(mistakes);

        // The place is that of the key itself, unless the key is not there or the item has none.
        if (!words.Contains("missing", StringComparison.Ordinal) && key.Length > 0 && !key.EndsWith(']'))
        {
            string atMark = file.Text.Split('\n')[line - 1][(column - 1)..];
            Assert.StartsWith(key[(key.LastIndexOf('.') + 1)..], atMark, StringComparison.Ordinal);
        }
    }

    private static string Read(string name) =>
        File.ReadAllText(Path.Combine(AppContext.BaseDirectory, "Files", "Data", name));
}
