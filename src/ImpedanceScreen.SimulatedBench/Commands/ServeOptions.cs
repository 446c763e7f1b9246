using System.CommandLine;

namespace ImpedanceScreen.SimulatedBench.Commands;

/// <summary>The command line's options.</summary>
internal sealed class ServeOptions
{
    private const double TimeScaleMin = 0.001;

    private readonly Option<string> fixture = new("--fixture") { Description = "Fixture file.", Required = true };
    private readonly Option<string> limits = new("--limits") { Description = "Limit file.", Required = true };
    private readonly Option<string> population = new("--population")
    {
        Description = "Population file of the simulated boards.", Required = true,
    };

    private readonly Option<ulong> seed = new("--seed")
    {
        Description = "Everything random follows from it.", DefaultValueFactory = _ => 1,
    };

    private readonly Option<double> timeScale = new("--time-scale")
    {
        Description = "Factor on settling, integration and physics, 0.001 to 1.", DefaultValueFactory = _ => 1.0,
    };

    private readonly Option<long?> boards = new("--boards")
    {
        Description = "How many boards the handler presents; without it there is no end.",
    };

    private readonly Option<string> firstSerial = new("--first-serial")
    {
        Description = "Serial number of the first board; its trailing digits count on.",
        DefaultValueFactory = _ => "BOARD-000001",
    };

    private readonly Option<string?> truth = new("--truth") { Description = "Where the truth about each board goes." };
    private readonly Option<string?> log = new("--log") { Description = "Where coils, inputs, readings and boards are logged." };
    private readonly Option<bool> freePorts = new("--free-ports") { Description = "Listen on free loopback ports." };
    private readonly Option<string[]> serial = new("--serial")
    {
        Description = "Far end of a serial link, LINK=DEVICE; once a serial link.", DefaultValueFactory = _ => [],
    };

    public void AddTo(Command command)
    {
        timeScale.Validators.Add(result =>
        {
            if (!(result.GetValueOrDefault<double>() is >= TimeScaleMin and <= 1.0))
            {
                result.AddError("--time-scale must lie between 0.001 and 1");
            }
        });
        serial.Validators.Add(result =>
        {
            if (result.GetValueOrDefault<string[]>()?.Any(each => each.IndexOf('=', StringComparison.Ordinal) < 1) == true)
            {
                result.AddError("--serial is written LINK=DEVICE");
            }
        });
        foreach (Option option in new Option[]
            { fixture, limits, population, seed, timeScale, boards, firstSerial, truth, log, freePorts, serial })
        {
            command.Add(option);
        }
    }

    public ServeRequest Read(ParseResult parsed) => new(
        parsed.GetRequiredValue(fixture),
        parsed.GetRequiredValue(limits),
        parsed.GetRequiredValue(population),
        parsed.GetValue(seed),
        parsed.GetValue(timeScale),
        parsed.GetValue(boards),
        parsed.GetRequiredValue(firstSerial),
        parsed.GetValue(truth),
        parsed.GetValue(log),
        parsed.GetValue(freePorts),
        parsed.GetRequiredValue(serial)
            .Select(each => each.Split('=', 2))
            .ToDictionary(parts => parts[0], parts => parts[1]));
}
