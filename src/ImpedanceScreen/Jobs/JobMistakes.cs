using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>Notes mistakes of one output and drive state at their places in either file.</summary>
internal sealed class JobMistakes(
    LimitFile limits, FixtureFile fixture, string outputPath, string statePath, List<Mistake> mistakes)
{
    internal int Count => mistakes.Count;

    /// <summary>A mistake at a key of the drive state in the limit file.</summary>
    internal void AtState(string key, string problem, string cure) =>
        Add(limits.Source, $"{statePath}.{key}", problem, cure);

    /// <summary>A mistake at a key of the output in the limit file.</summary>
    internal void AtOutput(string key, string problem, string cure) =>
        Add(limits.Source, $"{outputPath}.{key}", problem, cure);

    /// <summary>A mistake at a key of the fixture file.</summary>
    internal void AtFixture(string path, string problem, string cure) => Add(fixture.Source, path, problem, cure);

    private void Add(FileText file, string path, string problem, string cure)
    {
        Mistake mistake = new(file.Name, MarkFinder.Find(file, path), path, problem, cure);
        if (!mistakes.Contains(mistake))
        {
            mistakes.Add(mistake);
        }
    }
}
