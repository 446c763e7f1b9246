using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.SimulatedBench.Populations;
using ImpedanceScreen.SimulatedBench.Randomness;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>
/// What the bench really is where its fixture file states values with uncertainties: drawn once a bench, each from its
/// declared distribution.
/// </summary>
public sealed class BenchTruth
{
    // A lead's stated uncertainty covers both its own value and the contacts' variation from board to board.
    private static readonly double EqualPart = Math.Sqrt(0.5);

    private readonly ulong seed;
    private readonly Dictionary<Load, TrueLoad> loads = [];
    private readonly Dictionary<string, double> leads = [];
    private readonly Dictionary<string, double> rails = [];
    private readonly Dictionary<MeterRange, TrueRange> ranges = [];

    /// <summary>Draws the truth of a bench.</summary>
    public BenchTruth(FixtureFile fixture, Surroundings surroundings, ulong seed)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        ArgumentNullException.ThrowIfNull(surroundings);
        this.seed = seed;
        TemperatureDegC = Stream("temperature").Normal(surroundings.TemperatureDegC, surroundings.TemperatureSpreadDegC);
        SensorErrorDegC = Stream("sensor").Normal(0.0, fixture.TemperatureSensor?.StandardUncertaintyDegC ?? 0.0);
        foreach (LoadBank bank in fixture.LoadBanks)
        {
            foreach (Load load in bank.Loads)
            {
                loads[load] = DrawLoad(bank.Name, load);
            }
        }

        foreach (FixtureOutput output in fixture.Outputs)
        {
            leads[output.Name] = Stream("lead", output.Name)
                .Normal(output.LeadOhm.Value, EqualPart * output.LeadOhm.StandardUncertainty);
        }

        foreach (LoadReturn rail in fixture.LoadReturns)
        {
            rails[rail.Name] = Draw(Stream("rail", rail.Name), rail.VoltageVolt);
        }

        foreach (Meter meter in fixture.Meters)
        {
            for (int i = 0; i < meter.Ranges.Count; i++)
            {
                ranges[meter.Ranges[i]] = DrawRange(Stream("range", meter.Name, $"{i}"), meter.Ranges[i]);
            }
        }
    }

    /// <summary>Temperature beside the loads, °C.</summary>
    public double TemperatureDegC { get; }

    /// <summary>Error of the temperature sensor, °C.</summary>
    public double SensorErrorDegC { get; }

    /// <summary>A load as it really is.</summary>
    public TrueLoad Load(Load load) => loads[load];

    /// <summary>A rail's true voltage, V.</summary>
    public double RailVolt(string name) => rails[name];

    /// <summary>A meter's range as it really is.</summary>
    public TrueRange Range(MeterRange range) => ranges[range];

    /// <summary>Lead resistance of an output with the contacts that one board makes, Ω.</summary>
    public double LeadOhm(FixtureOutput output, long ordinal)
    {
        ArgumentNullException.ThrowIfNull(output);
        double contact = new KeyedRandom(seed, ordinal, "contact", output.Name)
            .Normal(0.0, EqualPart * output.LeadOhm.StandardUncertainty);
        return Math.Max(0.0, leads[output.Name] + contact);
    }

    private TrueLoad DrawLoad(string bank, Load load)
    {
        double common = load.CommonUncertaintyOhm ?? load.StandardUncertaintyOhm;
        double own = Math.Sqrt(Math.Max(0.0, Math.Pow(load.StandardUncertaintyOhm, 2) - (common * common)));

        // Loads of one certificate share the laboratory's reference: one draw moves them all.
        double shared = Stream("certificate", load.Certificate).Normal(0.0, 1.0);
        double calibrated = load.ResistanceOhm + (shared * common) + Stream("load", bank, load.Name).Normal(0.0, own);
        double warm = 1.0 + (load.TemperatureCoefficientPerKelvin * (TemperatureDegC - load.CalibrationTemperatureDegC));
        double branch = Math.Max(0.0, Draw(Stream("branch", bank, load.Name), load.BranchOhm));
        return new TrueLoad(calibrated * warm, branch, load.SelfHeatingPerWatt);
    }

    private static TrueRange DrawRange(KeyedRandom random, MeterRange range) => new(
        1.0 + random.Rectangular(range.GainLimit),
        random.Rectangular(range.OffsetLimitVolt),
        range.InputOhm * (1.0 + random.Rectangular(range.InputLimit)));

    private static double Draw(KeyedRandom random, Uncertain stated) =>
        random.Normal(stated.Value, stated.StandardUncertainty);

    private KeyedRandom Stream(params ReadOnlySpan<string> key) => new(seed, 0, key);
}

/// <summary>A load as it really is.</summary>
/// <param name="ColdOhm">Resistance at the bench's temperature without dissipation, Ω.</param>
/// <param name="BranchOhm">Branch resistance, Ω.</param>
/// <param name="SelfHeatingPerWatt">Relative change a watt, 1/W.</param>
public sealed record TrueLoad(double ColdOhm, double BranchOhm, double SelfHeatingPerWatt)
{
    /// <summary>Resistance of the whole path while the load dissipates, Ω.</summary>
    public double PathOhm(double powerWatt) => (ColdOhm * (1.0 + (SelfHeatingPerWatt * powerWatt))) + BranchOhm;
}

/// <summary>A meter's range as it really is.</summary>
/// <param name="Gain">Indicated over true voltage.</param>
/// <param name="OffsetVolt">Indication at zero, V.</param>
/// <param name="InputOhm">Input resistance, Ω.</param>
public sealed record TrueRange(double Gain, double OffsetVolt, double InputOhm);
