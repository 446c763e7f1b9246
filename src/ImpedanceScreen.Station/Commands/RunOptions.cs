using System.CommandLine;

namespace ImpedanceScreen.Station.Commands;

/// <summary>Options of the commands that screen boards.</summary>
internal sealed class RunOptions
{
    private readonly Option<string> fixture = FileOptions.Fixture();
    private readonly Option<string> limits = FileOptions.Limits();
    private readonly Option<string> store = FileOptions.Store();

    private readonly Option<string?> lot = new("--lot") { Description = "Lot name.", HelpName = "NAME" };

    private readonly Option<string?> person = new("--operator") { Description = "Who works the bench.", HelpName = "NAME" };

    private readonly Option<bool> json = new("--json")
    {
        Description = "Each board's result as one line of JSON on standard output, and nothing else there.",
    };

    private readonly Option<string?> logFolder = new("--log-folder")
    {
        Description = "Folder of the rolling log; beside the store by default.", HelpName = "FOLDER",
    };

    private readonly Option<bool> simulated = new("--simulated")
    {
        Description = "Start a simulated bench for this fixture and use it; needs --population.",
    };

    private readonly Option<string?> population = new("--population")
    {
        Description = "Population file of the simulated boards (YAML).", HelpName = "FILE",
    };

    private readonly Option<ulong> seed = new("--seed")
    {
        Description = "Seed of the simulated bench.", DefaultValueFactory = _ => 1, HelpName = "N",
    };

    private readonly Option<double> timeScale = new("--time-scale")
    {
        Description = "Factor on settling and integration of a simulated bench, 0.001 to 1.",
        DefaultValueFactory = _ => 1.0,
        HelpName = "X",
    };

    private readonly Option<string?> benchLog = new("--bench-log")
    {
        Description = "Where the simulated bench logs coils and readings.", HelpName = "FILE",
    };

    public void AddTo(Command command)
    {
        command.Add(fixture);
        command.Add(limits);
        command.Add(store);
        command.Add(lot);
        command.Add(person);
        command.Add(json);
        command.Add(logFolder);
        command.Add(simulated);
        command.Add(population);
        command.Add(seed);
        command.Add(timeScale);
        command.Add(benchLog);
    }

    public RunRequest Read(ParseResult parsed)
    {
        double scale = parsed.GetValue(timeScale);
        bool isSimulated = parsed.GetValue(simulated);
        if (isSimulated && parsed.GetValue(population) is null)
        {
            throw new NotBegunException("--simulated needs --population FILE: which boards are simulated");
        }

        if (!(scale is >= 0.001 and <= 1.0))
        {
            throw new NotBegunException("--time-scale must lie between 0.001 and 1");
        }

        return new RunRequest(
            parsed.GetRequiredValue(fixture),
            parsed.GetRequiredValue(limits),
            parsed.GetRequiredValue(store),
            parsed.GetValue(lot),
            parsed.GetValue(person),
            parsed.GetValue(json),
            parsed.GetValue(logFolder),
            isSimulated
                ? new SimulationRequest(parsed.GetValue(population)!, parsed.GetValue(seed), parsed.GetValue(benchLog))
                : null,
            scale);
    }
}
