using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Planning;

namespace ImpedanceScreen.Reference;

/// <summary>A made-up job, and readings of a made-up source on it, drawn from what the job declares.</summary>
internal sealed class SourceBench
{
    public static readonly DateTimeOffset Start = new(2026, 3, 2, 8, 0, 0, TimeSpan.Zero);

    private readonly Random random;

    public SourceBench(int seed = 1) => random = new Random(seed);

    public static MeterRange Range { get; } = new(10, 30e-6, 50e-6, 8e-6, 60, 1e-6, 10e6, 0.01);

    public static StateJob Job(
        double vth = 5, double rth = 100, double rail = 0, Sensing sensing = Sensing.TwoWire, bool contact = false,
        double guard = 1, IReadOnlyList<QuantityLimit>? limits = null)
    {
        Load[] loads = [.. new double[] { 3300, 1000, 470, 220 }.Select((ohm, i) => MakeLoad($"L{ohm}", ohm, i))];
        var rule = new DecisionRule(guard);
        limits ??=
        [
            new(Quantity.SourceVoltage, vth - 0.05, vth + 0.05, rule, null),
            new(Quantity.InternalResistance, 0.95 * rth, 1.05 * rth, rule, null),
        ];
        double settled = Math.Max(0.2, Math.Abs(vth));
        var state = new DriveState(
            "on", null, new(vth, rth), new(vth - (0.1 * settled), vth + (0.1 * settled)), rail == 0 ? null : "rail",
            [.. loads.Select(load => load.Name)], limits, new(0.1, 1, TimeSpan.FromSeconds(5)),
            TimeSpan.FromMilliseconds(20), 4);
        var output = new FixtureOutput(
            "OUT1", new("k1", 0, null), new("k1", 1, null), "dmm", "bank", "a", sensing, new(0.2, 0.01),
            contact ? LoadCurrentProof.ContactReadback : LoadCurrentProof.ChangeFromUnloaded);
        var meter = new Meter(
            "dmm", "m", "id", TimeSpan.FromMilliseconds(20), 1, "M-1", new(2026, 1, 1), new(2027, 1, 1), [Range]);
        LoadReturn? back = rail == 0
            ? null
            : new("rail", new("k1", 2, null), new("k1", 3, null), "dmm", new(rail, 0.02), 0.5);
        return new(output, state, null, back, loads, meter, Range);
    }

    /// <summary>Draws one board on one bench, every declared term anew, and reads it as the plan asks.</summary>
    /// <param name="job">The job.</param>
    /// <param name="source">Voltage of the source at a load current.</param>
    /// <param name="fixedDraw">A bench that is drawn already.</param>
    public IReadOnlyList<LoadPointReadings> Read(StateJob job, Func<double, double> source, Draw? fixedDraw = null)
    {
        Draw draw = fixedDraw ?? Draw.From(job, random);
        var taken = new List<LoadPointReadings>();
        while (FixedPlan.Next(job, taken, 40) is PlanStep.Measure step)
        {
            double volt = step.Point.Sensed == Sensed.LoadReturn
                ? draw.ReturnVolt
                : Solve(source, draw, step.Point.Load is { } load ? draw.PathOhm[IndexOf(job,
                    load)] : double.PositiveInfinity);
            bool? proved = step.Point.Load is null || job.Output.LoadCurrentProof != LoadCurrentProof.ContactReadback
                ? null
                : true;
            taken.Add(new(step.Point, proved, [.. Enumerable.Range(0, step.Count).Select(_ => Reading(job, draw,
                volt))]));
        }

        return taken;
    }

    public IReadOnlyList<LoadPointReadings> Read(StateJob job, double vth, double rth) =>
        Read(job, ampere => vth - (rth * ampere));

    public static MeterReading Valid(double volt) =>
        new(volt.ToString("E6", System.Globalization.CultureInfo.InvariantCulture), ReadingCondition.Valid, volt,
            Start);

    private MeterReading Reading(StateJob job, Draw draw, double volt)
    {
        double shown = (volt * (1 + draw.Gain)) + draw.OffsetVolt + (draw.NoiseVolt * FitCase.Normal(random));
        return Valid(Math.Round(shown / job.Range.ResolutionVolt) * job.Range.ResolutionVolt);
    }

    // The voltage where source (behind the lead) and load line meet, by bisection: sources here never rise with
    // current.
    private static double Solve(Func<double, double> source, Draw draw, double pathOhm)
    {
        double low = -100;
        double high = 100;
        for (int i = 0; i < 200; i++)
        {
            double volt = 0.5 * (low + high);
            double ampere = ((volt - draw.ReturnVolt) / pathOhm) + (volt * draw.MeterSiemens);
            bool below = source(ampere) - (draw.LeadOhm * ampere) > volt;
            low = below ? volt : low;
            high = below ? high : volt;
        }

        return 0.5 * (low + high);
    }

    private static int IndexOf(StateJob job, Load load) => job.Loads.ToList().IndexOf(load);

    private static Load MakeLoad(string name, double ohm, int coil) => new(
        name, new("k2", (ushort)coil, null), ohm, ohm * 2e-4, 2, ohm * 6e-5, "C-7", new(2026, 1, 1), new(2027, 1, 1),
        15e-6, 23, 10e-6, 1, new(0.05, 0.005));
}

/// <summary>One bench and its errors, drawn from the declared distributions.</summary>
internal sealed record Draw(
    double[] PathOhm, double ReturnVolt, double LeadOhm, double MeterSiemens, double Gain, double OffsetVolt,
    double NoiseVolt)
{
    public const double TemperatureDegC = 26;

    public const double TemperatureUncertaintyDegC = 0.3;

    public static Draw From(StateJob job, Random random)
    {
        double Normal() => FitCase.Normal(random);
        double Flat() => (2 * random.NextDouble()) - 1;
        MeterRange range = job.Range;
        double certificate = Normal();
        double temperature = TemperatureDegC + (TemperatureUncertaintyDegC * Normal());
        double lead = job.Output.LeadOhm.Value + (job.Output.LeadOhm.StandardUncertainty * Normal());
        double[] paths = [.. job.Loads.Select(load =>
        {
            double common = load.CommonUncertaintyOhm ?? load.StandardUncertaintyOhm;
            double own = Math.Sqrt((load.StandardUncertaintyOhm * load.StandardUncertaintyOhm) - (common * common));
            double calibrated = load.ResistanceOhm + (common * certificate) + (own * Normal());
            double warmer = temperature - load.CalibrationTemperatureDegC;
            double branch = load.BranchOhm.Value + (load.BranchOhm.StandardUncertainty * Normal());
            double leadOhm = job.Output.Sensing == Sensing.Terminal ? lead : 0;
            return (calibrated * (1 + (load.TemperatureCoefficientPerKelvin * warmer))) + branch + leadOhm;
        })];

        // The pooled noise is an estimate with its degrees of freedom: the true one scatters about it.
        double chiSquared = Enumerable.Range(0, range.NoiseDegreesOfFreedom).Sum(_ => Math.Pow(Normal(), 2));
        return new(
            paths,
            job.LoadReturn?.VoltageVolt.Value ?? 0,
            job.Output.Sensing == Sensing.TwoWire ? lead : 0,
            (1 + (range.InputLimit * Flat())) / range.InputOhm,
            range.GainLimit * Flat(),
            range.OffsetLimitVolt * Flat(),
            range.NoiseVolt * Math.Sqrt(range.NoiseDegreesOfFreedom / chiSquared));
    }
}
