using ImpedanceScreen.Files;

namespace ImpedanceScreen.Jobs;

/// <summary>Notes mistakes of one output and drive state at their places in either file.</summary>
internal sealed class JobMistakes(ScreeningFiles files, string outputPath, string statePath, List<Mistake> mistakes)
{
    /// <summary>How many there are so far, of all states.</summary>
    internal int Count => mistakes.Count;

    /// <summary>A mistake at a key of the drive state in the limit file.</summary>
    internal void AtState(string key, string problem, string cure) =>
        Add(files.Limits.Source, $"{statePath}.{key}", problem, cure);

    /// <summary>A mistake at a key of the output in the limit file.</summary>
    internal void AtOutput(string key, string problem, string cure) =>
        Add(files.Limits.Source, $"{outputPath}.{key}", problem, cure);

    /// <summary>A mistake at a key of the fixture file.</summary>
    internal void AtFixture(string path, string problem, string cure) => Add(files.Fixture.Source, path, problem, cure);

    /// <summary>All of them, the limit file's first, each file's in the order of their places.</summary>
    internal IReadOnlyList<Mistake> InOrder() =>
    [
        .. mistakes.OrderBy(mistake => mistake.File == files.Limits.Source.Name ? 0 : 1)
            .ThenBy(mistake => mistake.Mark.Line).ThenBy(mistake => mistake.Mark.Column),
    ];

    private void Add(FileText file, string path, string problem, string cure)
    {
        Mistake mistake = new(file.Name, MarkFinder.Find(file, path), path, problem, cure);
        if (!mistakes.Contains(mistake))
        {
            mistakes.Add(mistake);
        }
    }
}
