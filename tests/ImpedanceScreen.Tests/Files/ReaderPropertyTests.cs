using CsCheck;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Files;

public sealed class ReaderPropertyTests
{
    private const string Awkward = "{}[]:,-#&*!|>'\"%@`?~<\t\n \\0\u0000\u00e9\ud800\u2028";

    private static readonly string[] Words =
    [
        "~", "null", "-1e999", "NaN", "!!int 5", "&a 5", "*a", "<<: 1", "\n---\n", "\n...\n", "\"\\UFFFFFFFF\"",
        "[[[[[[[[[[[[[[[[[[[[",
    ];

    // One edit: where, how much is removed, and what is put there.
    private static readonly Gen<(double At, int Removed, string Put)> Change = Gen.Select(
        Gen.Double[0.0, 1.0],
        Gen.Int[0, 30],
        Gen.OneOf(
            Gen.Char[Awkward].Array[0, 5].Select(letters => new string(letters)),
            Gen.Int[0, Words.Length - 1].Select(i => Words[i])));

    private static readonly Gen<(double At, int Removed, string Put)[]> Changes = Change.Array[1, 4];

    [Fact]
    public void No_mutated_limit_file_makes_the_reader_throw() =>
        Changes.Sample(changes => IsAnswered(SmallFiles.LimitsText, changes, LimitFileBinder.Bind), iter: 1500);

    [Fact]
    public void No_mutated_fixture_file_makes_the_reader_throw() =>
        Changes.Sample(changes => IsAnswered(SmallFiles.FixtureText, changes, FixtureFileBinder.Bind), iter: 1000);

    [Fact]
    public void No_text_at_all_makes_the_reader_throw() =>
        Gen.OneOf(Gen.Char[Awkward], Gen.Char['a', 'c']).Array[0, 60].Sample(
            letters => IsAnswered(new string(letters), [], LimitFileBinder.Bind), iter: 5_000);

    [Fact]
    public void A_document_that_the_parser_leaves_in_the_middle_is_a_mistake() =>
        Assert.True(IsAnswered(SmallFiles.LimitsText, [(0, 28, "'"), (0, 19, "? ")], LimitFileBinder.Bind));

    // Either a value, or mistakes that each have a place, a problem and a cure, on one line.
    private static bool IsAnswered<T>(
        string text, (double At, int Removed, string Put)[] changes, Func<FileText, Checked<T>> bind)
        where T : class
    {
        foreach ((double at, int removed, string put) in changes)
        {
            int start = (int)(at * text.Length);
            text = text.Remove(start, Math.Min(removed, text.Length - start)).Insert(start, put);
        }

        Checked<T> read = bind(new("mutated", text));
        return read.TryGet(out _) == (read.Mistakes.Count == 0)
            && read.Mistakes.All(mistake =>
                mistake.Mark is { Line: > 0, Column: > 0 }
                && mistake.Problem.Length > 0
                && mistake.Cure.Length > 0
                && !mistake.ToString().Contains('\n', StringComparison.Ordinal));
    }
}
