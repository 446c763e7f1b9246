using System.Text.RegularExpressions;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Files;

public sealed partial class ReadmeTests
{
    private const string Probe = "qqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqqq";

    [Fact]
    public void The_limit_readme_documents_every_key_and_no_other() => AssertSame(
        "limits/README.md", KnownKeys(SmallFiles.LimitsText, text => LimitFileBinder.Bind(text).Mistakes));

    [Fact]
    public void The_fixture_readme_documents_every_key_and_no_other() => AssertSame(
        "fixtures/README.md", KnownKeys(SmallFiles.FixtureText, text => FixtureFileBinder.Bind(text).Mistakes));

    [Theory]
    [InlineData("limits/README.md")]
    [InlineData("fixtures/README.md")]
    public void Each_readme_says_what_the_program_is_not(string name)
    {
        string lines = File.ReadAllText(ShippedFiles.PathOf(name));
        string text = string.Join(' ', lines.Split((char[]?)null, StringSplitOptions.RemoveEmptyEntries));
        Assert.Contains("never a safety function", text, StringComparison.Ordinal);
        Assert.Contains("local codes and licensed practice", text, StringComparison.Ordinal);
        Assert.Contains("The emergency stop and guarding are hardware", text, StringComparison.Ordinal);
    }

    // A key that is like no other makes the binder name all keys that it knows at that place.
    private static SortedSet<string> KnownKeys(string text, Func<FileText, IReadOnlyList<Mistake>> bind)
    {
        SortedSet<string> keys = new(StringComparer.Ordinal);
        foreach (string probed in Probed(text))
        {
            Mistake mistake = Assert.Single(bind(new("probed", probed)));
            Assert.EndsWith(Probe, mistake.Key, StringComparison.Ordinal);
            keys.UnionWith(mistake.Cure["known here: ".Length..].Split(", "));
        }

        return keys;
    }

    // The text once for each mapping in it, with the strange key put into that mapping.
    private static IEnumerable<string> Probed(string text)
    {
        yield return $"{text}{Probe}: 1\n";
        foreach (Match flow in FlowMapping().Matches(text))
        {
            yield return text.Insert(flow.Index + 1, $"{Probe}: 1, ");
        }

        foreach (Match block in BlockMapping().Matches(text))
        {
            Group key = block.Groups["key"];
            int column = key.Index - text.LastIndexOf('\n', key.Index) - 1;
            yield return text.Insert(key.Index, $"{Probe}: 1\n{new string(' ', column)}");
        }
    }

    private static void AssertSame(string readme, SortedSet<string> accepted)
    {
        string text = File.ReadAllText(ShippedFiles.PathOf(readme));
        List<string> documented = [.. TableKey().Matches(text).Select(row => row.Groups["key"].Value)];
        Assert.Empty(accepted.Except(documented, StringComparer.Ordinal));
        Assert.Empty(documented.Except(accepted, StringComparer.Ordinal));
    }

    [GeneratedRegex(@"\{(?=[a-z_])", RegexOptions.ExplicitCapture, 1000)]
    private static partial Regex FlowMapping();

    // The first key of a mapping: after `- `, or on the line below a key without a value.
    [GeneratedRegex(@"(- |[a-z_]:\n +)(?=[a-z_])(?<key>[a-z_0-9]+):", RegexOptions.ExplicitCapture, 1000)]
    private static partial Regex BlockMapping();

    [GeneratedRegex(@"^\| `(?<key>[a-z_0-9]+)` \|", RegexOptions.ExplicitCapture | RegexOptions.Multiline, 1000)]
    private static partial Regex TableKey();
}
