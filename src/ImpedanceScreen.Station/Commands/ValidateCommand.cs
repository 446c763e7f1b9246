using System.CommandLine;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Station.Hosting;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>validate</c>: check limit and fixture files, alone and against one another.</summary>
internal static class ValidateCommand
{
    public static Command Make()
    {
        Option<string?> limits = new("--limits") { Description = "Limit file.", HelpName = "FILE" };
        Option<string?> fixture = new("--fixture") { Description = "Fixture file.", HelpName = "FILE" };
        var command = new Command(
            "validate", "Check a limit file, a fixture file, or both against one another; every mistake is one line.")
        {
            limits, fixture,
        };
        command.SetAction(parsed => Run(parsed.GetValue(limits), parsed.GetValue(fixture)));
        return command;
    }

    private static int Run(string? limitsPath, string? fixturePath)
    {
        if (limitsPath is null && fixturePath is null)
        {
            throw new NotBegunException("name --limits FILE, --fixture FILE or both");
        }

        List<Mistake> mistakes = [];
        LimitFile? limits = Bound(limitsPath, LimitFileBinder.Bind, mistakes);
        FixtureFile? fixture = Bound(fixturePath, FixtureFileBinder.Bind, mistakes);
        if (limits is not null && fixture is not null)
        {
            mistakes.AddRange(JobBinder.Bind(limits, fixture).Mistakes);
        }

        foreach (Mistake mistake in mistakes)
        {
            Console.WriteLine(mistake);
        }

        foreach (string warning in fixture is null ? [] : CalibrationWarnings.Of(fixture))
        {
            Console.Error.WriteLine(warning);
        }

        string files = string.Join(" and ", new[] { limitsPath, fixturePath }.OfType<string>());
        Console.WriteLine(mistakes.Count == 0 ? $"{files}: good" : $"{files}: {mistakes.Count} to put right");
        return mistakes.Count == 0 ? ExitCode.Done : ExitCode.Wrong;
    }

    private static T? Bound<T>(string? path, Func<FileText, Checked<T>> bind, List<Mistake> mistakes)
        where T : class
    {
        if (path is null)
        {
            return null;
        }

        Checked<T> result = bind(TextFiles.Read(path));
        mistakes.AddRange(result.Mistakes);
        return result.TryGet(out T? bound) ? bound : null;
    }
}
