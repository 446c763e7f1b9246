using ImpedanceScreen.Benchmarks.Records;

namespace ImpedanceScreen.Benchmarks;

/// <summary>All figure commands.</summary>
internal static class FigureCommands
{
    public static IReadOnlyList<IFigureCommand> All { get; } =
    [
        new BoardTimeCommand(),
        new FitFigure(),
        new RepliesCommand(),
        new AppendCommand(),
        new TamperCommand(),
        new KillsCommand(),
        new DurabilityCommand(),
    ];
}
