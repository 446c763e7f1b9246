using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench.Circuits;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>What is drawn once a bench, over many benches.</summary>
[Collection(RealTime.Name)]
public sealed class BenchTruthTests
{
    private const int Benches = 4000;

    private static readonly BenchTruth[] Drawn = [.. Enumerable.Range(0, Benches)
        .Select(seed => new BenchTruth(Tern6.Fixture, Tern6.Population.Surroundings, (ulong)seed))];

    private static readonly IReadOnlyList<Load> Loads = Tern6.Fixture.LoadBanks[0].Loads;

    [Fact]
    public void Loads_scatter_by_their_certificate_and_share_its_common_part()
    {
        double[] heavy = Deviations(Loads[0]);
        double[] light = Deviations(Loads[^1]);
        double u1 = Loads[0].StandardUncertaintyOhm;
        double u2 = Loads[^1].StandardUncertaintyOhm;
        double shared = Loads[0].CommonUncertaintyOhm!.Value * Loads[^1].CommonUncertaintyOhm!.Value / (u1 * u2);
        Assert.Equal(1.0, Rms(heavy) / u1, 0.06);
        Assert.Equal(1.0, Rms(light) / u2, 0.06);
        double correlation = heavy.Zip(light, (a, b) => a * b).Average() / (Rms(heavy) * Rms(light));
        Assert.Equal(shared, correlation, 5.0 / Math.Sqrt(Benches));
    }

    [Fact]
    public void A_lead_scatters_by_its_stated_uncertainty_over_benches_and_boards()
    {
        FixtureOutput output = Tern6.Fixture.Outputs[0];
        double[] leads = [.. Drawn.Select(truth => truth.LeadOhm(output, 1) - output.LeadOhm.Value)];
        Assert.Equal(1.0, Rms(leads) / output.LeadOhm.StandardUncertainty, 0.06);
        Assert.NotEqual(Drawn[0].LeadOhm(output, 1), Drawn[0].LeadOhm(output, 2));
        Assert.Equal(Drawn[0].LeadOhm(output, 2), Drawn[0].LeadOhm(output, 2));
    }

    [Fact]
    public void Meter_gain_fills_its_declared_limits_and_never_leaves_them()
    {
        MeterRange range = Tern6.Fixture.Meters[0].Ranges[0];
        double[] gains = [.. Drawn.Select(truth => truth.Range(range).Gain - 1.0)];
        Assert.All(gains, gain => Assert.InRange(gain, -range.GainLimit, range.GainLimit));

        // Standard deviation of a rectangular distribution: half width over the root of three (JCGM 100 4.3.7).
        Assert.Equal(1.0, Rms(gains) / (range.GainLimit / Math.Sqrt(3.0)), 0.06);
    }

    private static double[] Deviations(Load load) => [.. Drawn.Select(truth =>
        (truth.Load(load).ColdOhm
            / (1.0 + (load.TemperatureCoefficientPerKelvin * (truth.TemperatureDegC - load.CalibrationTemperatureDegC))))
        - load.ResistanceOhm)];

    private static double Rms(double[] values) => Math.Sqrt(values.Average(value => value * value));
}
