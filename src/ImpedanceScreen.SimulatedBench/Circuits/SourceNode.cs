using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>
/// The point of one output where the meter senses. Between two switchings its voltage runs exponentially towards a
/// target.
/// </summary>
internal sealed class SourceNode(FixtureOutput output, IReadOnlyList<StateJob> states)
{
    public FixtureOutput Output => output;

    /// <summary>The drive states that its limit file knows; empty where the product has no such output.</summary>
    public IReadOnlyList<StateJob> States => states;

    public double Volt { get; private set; }

    public double TargetVolt { get; set; }

    /// <summary>Time constant, s; infinity where nothing drives the node.</summary>
    public double TimeConstantSeconds { get; set; } = double.PositiveInfinity;

    /// <summary>Scatter of the source behind it, V.</summary>
    public double NoiseVolt { get; set; }

    /// <summary>The drive state that stimuli make; null where none does.</summary>
    public DriveState? Driven(Func<Relay, bool> isClosed) =>
        (states.FirstOrDefault(state => state.Stimulus is { } stimulus && isClosed(stimulus.Relay))
            ?? states.FirstOrDefault(state => state.Stimulus is null))?.State;

    public void Advance(double seconds) => Volt = Exponential.Value(Volt, TargetVolt, TimeConstantSeconds, seconds);

    public double Integral(double fromSeconds, double toSeconds) =>
        Exponential.Integral(Volt, TargetVolt, TimeConstantSeconds, fromSeconds, toSeconds);
}
