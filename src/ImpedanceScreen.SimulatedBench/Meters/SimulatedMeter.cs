using System.Globalization;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench.Circuits;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Randomness;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.SimulatedBench.Meters;

/// <summary>A voltmeter with the errors that its fixture file allows it.</summary>
internal sealed class SimulatedMeter
{
    /// <summary>What a meter answers beyond its range (SCPI-1999 volume 1 section 7.2.1.4).</summary>
    public const double OverloadValue = 9.9e37;

    /// <summary>Integration after a reset, in power-line cycles.</summary>
    public const double ResetCycles = 10.0;

    // How far a range reads beyond its full scale: 20 % is common practice.
    private const double OverRange = 1.2;

    private readonly BenchModel model;
    private readonly Meter meter;
    private readonly Circuit circuit;
    private readonly BenchTruth truth;
    private readonly TimeSpan turnaround;
    private readonly KeyedRandom noise;
    private MeterRange? fixedRange;

    public SimulatedMeter(
        BenchModel model, Meter meter, Circuit circuit, BenchTruth truth, TimeSpan turnaround, ulong seed)
    {
        this.model = model;
        this.meter = meter;
        this.circuit = circuit;
        this.truth = truth;
        this.turnaround = turnaround;
        noise = new KeyedRandom(seed, 0, "noise", meter.Name);
        Reset();
    }

    public Meter Meter => meter;

    /// <summary>Integration in power-line cycles.</summary>
    public double Cycles { get; set; } = ResetCycles;

    /// <summary>Full scale of the range in use, V.</summary>
    public double FullScaleVolt => PresentRange.FullScaleVolt;

    private MeterRange PresentRange => fixedRange ?? meter.Ranges[^1];

    /// <summary>Range by the reading, integration as after power on.</summary>
    public void Reset()
    {
        Cycles = ResetCycles;
        Use(null);
    }

    /// <summary>Fixes the smallest range that holds a voltage.</summary>
    /// <returns>False where none does.</returns>
    public bool FixRange(double volt)
    {
        if (meter.Ranges.FirstOrDefault(range => range.FullScaleVolt >= Math.Abs(volt)) is not { } found)
        {
            return false;
        }

        Use(found);
        return true;
    }

    /// <summary>Integrates and answers; one caller at a time.</summary>
    public async Task<string> ReadAsync(CancellationToken cancellation)
    {
        TimeSpan integration = meter.Integration * (Cycles / meter.PowerLineCycles);
        TimeSpan real = model.Clock.Real(integration);
        long start;
        Measurement measurement;
        lock (model.Gate)
        {
            start = model.Clock.Now;
            double startSeconds = model.Clock.PhysicsSeconds(start);
            measurement = circuit.Measure(meter.Name, startSeconds, startSeconds + integration.TotalSeconds);
        }

        await Deadline.After(model.Clock.Time, start, real + turnaround).WaitAsync(cancellation);
        string answer;
        lock (model.Gate)
        {
            circuit.AdvanceTo(Math.Max(model.Seconds, measurement.EndSeconds));
            answer = Indicate(measurement, integration);
        }

        // As done, not as meant: a busy machine answers later.
        double spentMs = model.Clock.Milliseconds(model.Clock.Now) - model.Clock.Milliseconds(start);
        model.Log.Add(new ReadingTaken(
            meter.Name, model.Clock.Milliseconds(start), real.TotalMilliseconds, spentMs - real.TotalMilliseconds, answer));
        return answer;
    }

    private void Use(MeterRange? range)
    {
        lock (model.Gate)
        {
            fixedRange = range;
            circuit.SetInputResistance(meter.Name, truth.Range(PresentRange).InputOhm, model.Seconds);
        }
    }

    private string Indicate(Measurement measurement, TimeSpan integration)
    {
        MeterRange range = fixedRange
            ?? meter.Ranges.FirstOrDefault(each => Math.Abs(measurement.MeanVolt) <= each.FullScaleVolt * OverRange)
            ?? meter.Ranges[^1];
        TrueRange real = truth.Range(range);

        // White noise: its mean falls with the root of the time.
        double own = range.NoiseVolt * Math.Sqrt(meter.Integration / integration);
        double scatter = noise.Normal(0.0, Math.Sqrt((own * own) + Math.Pow(measurement.NoiseVolt, 2)));
        double volt = (real.Gain * measurement.MeanVolt) + real.OffsetVolt + scatter;
        return Format(Math.Abs(volt) > range.FullScaleVolt * OverRange
            ? Math.CopySign(OverloadValue, volt)
            : Math.Round(volt / range.ResolutionVolt) * range.ResolutionVolt);
    }

    // NR3 (IEEE 488.2 section 8.7.4).
    private static string Format(double volt) =>
        (double.IsNegative(volt) ? "-" : "+") + Math.Abs(volt).ToString("0.00000000E+00", CultureInfo.InvariantCulture);
}
