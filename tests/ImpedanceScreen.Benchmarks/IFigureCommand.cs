namespace ImpedanceScreen.Benchmarks;

/// <summary>A command that measures figures and prints them last.</summary>
internal interface IFigureCommand
{
    /// <summary>Its name on the command line.</summary>
    string Name { get; }

    /// <summary>What it measures.</summary>
    string Description { get; }

    /// <summary>How many cases it runs when not told.</summary>
    int DefaultCount { get; }

    /// <summary>Runs it.</summary>
    /// <returns>0 when every figure is reached, 1 on a miss.</returns>
    Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation);
}
