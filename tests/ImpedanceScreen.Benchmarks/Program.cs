using System.CommandLine;
using ImpedanceScreen.Benchmarks;

var root = new RootCommand("Figures of Impedance Screen, measured. Each command prints its figures last and exits with 1 on a miss.");
foreach (IFigureCommand figure in FigureCommands.All)
{
    Option<int> count = new("--count") { Description = "How many cases.", DefaultValueFactory = _ => figure.DefaultCount };
    Option<ulong> seed = new("--seed") { Description = "Seed of the random cases.", DefaultValueFactory = _ => 1 };
    var command = new Command(figure.Name, figure.Description) { count, seed };
    command.SetAction((parsed, cancellation) =>
        figure.RunAsync(parsed.GetValue(count), parsed.GetValue(seed), cancellation));
    root.Add(command);
}

return await root.Parse(args).InvokeAsync();
