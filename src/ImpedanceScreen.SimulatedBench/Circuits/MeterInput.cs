using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>The input of one meter: what it sees, and what it holds while it sees nothing.</summary>
internal sealed class MeterInput(Meter meter)
{
    // An input without sense relay keeps its charge until leakage takes it.
    private const double InputFarad = 300e-12;
    private const double LeakageOhm = 10e9;

    private readonly List<Measurement> measurements = [];

    public string Name => meter.Name;

    /// <summary>Input resistance at the present range, Ω.</summary>
    public double InputOhm { get; set; } = meter.Ranges[^1].InputOhm;

    private double Volt { get; set; }

    private double TimeConstantSeconds => InputFarad * Math.Min(InputOhm, LeakageOhm);

    public void Begin(Measurement measurement) => measurements.Add(measurement);

    /// <summary>Takes a stretch of time into every measurement under way.</summary>
    /// <param name="nodes">The nodes that the meter is connected to; several share one input.</param>
    /// <param name="railVolt">Voltage of a rail that it is connected to; null where to none.</param>
    /// <param name="startSeconds">Beginning of the stretch, s.</param>
    /// <param name="endSeconds">End of the stretch, s.</param>
    public void Advance(IReadOnlyList<SourceNode> nodes, double? railVolt, double startSeconds, double endSeconds)
    {
        foreach (Measurement measurement in measurements)
        {
            double from = Math.Max(startSeconds, measurement.StartSeconds) - startSeconds;
            double to = Math.Min(endSeconds, measurement.EndSeconds) - startSeconds;
            if (to > from)
            {
                measurement.Add(Integral(nodes, railVolt, from, to), nodes.Sum(node => node.NoiseVolt));
            }
        }

        measurements.RemoveAll(measurement => measurement.EndSeconds <= endSeconds);
    }

    /// <summary>Follows what is seen at the end of a stretch, or leaks away.</summary>
    public void Follow(IReadOnlyList<SourceNode> nodes, double? railVolt, double seconds)
    {
        int seen = nodes.Count + (railVolt is null ? 0 : 1);
        Volt = seen > 0
            ? (nodes.Sum(node => node.Volt) + (railVolt ?? 0.0)) / seen
            : Exponential.Value(Volt, 0.0, TimeConstantSeconds, seconds);
    }

    private double Integral(IReadOnlyList<SourceNode> nodes, double? railVolt, double from, double to)
    {
        int seen = nodes.Count + (railVolt is null ? 0 : 1);
        return seen > 0
            ? (nodes.Sum(node => node.Integral(from, to)) + ((railVolt ?? 0.0) * (to - from))) / seen
            : Exponential.Integral(Volt, 0.0, TimeConstantSeconds, from, to);
    }
}

/// <summary>One integration of a meter.</summary>
/// <param name="startSeconds">When it begins, s.</param>
/// <param name="endSeconds">When it ends, s.</param>
internal sealed class Measurement(double startSeconds, double endSeconds)
{
    private double integral;

    public double StartSeconds => startSeconds;

    public double EndSeconds => endSeconds;

    /// <summary>Mean voltage over the window, V.</summary>
    public double MeanVolt => integral / (endSeconds - startSeconds);

    /// <summary>Scatter of what was seen last, V.</summary>
    public double NoiseVolt { get; private set; }

    public void Add(double voltSeconds, double noiseVolt)
    {
        integral += voltSeconds;
        NoiseVolt = noiseVolt;
    }
}
