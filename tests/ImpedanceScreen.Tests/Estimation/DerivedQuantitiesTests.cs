using ImpedanceScreen.Estimation;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Tests.Estimation;

public sealed class DerivedQuantitiesTests
{
    [Fact]
    public void The_voltage_at_a_load_uses_the_correlation()
    {
        Estimate estimate = Of(10, 600, 0.01, 2, 1);
        Uncertain volt = DerivedQuantities.VoltageAtLoad(estimate, 600);
        Assert.Equal(5, volt.Value, 1e-12);

        // dV/dVth = 1/2, dV/dR = -5/1200: with r = 1 they subtract.
        Assert.Equal(Math.Abs((0.5 * 0.01) - (2 * 5 / 1200.0)), volt.StandardUncertainty, 1e-12);
    }

    [Fact]
    public void A_short_circuit_current_is_not_determined_below_three_uncertainties()
    {
        Assert.Null(DerivedQuantities.ShortCircuit(Of(10, 2.9, 0.01, 1, 0)));
        Assert.Null(DerivedQuantities.ShortCircuit(Of(10, -5, 0.01, 1, 0)));
        Assert.NotNull(DerivedQuantities.ShortCircuit(Of(10, 3.1, 0.01, 1, 0)));
    }

    [Fact]
    public void The_interval_of_the_short_circuit_current_satisfies_Fiellers_equation_and_widens_to_the_right()
    {
        Estimate estimate = Of(10, 100, 0.02, 8, 0.6);
        ShortCircuitCurrent current = DerivedQuantities.ShortCircuit(estimate)!;
        Assert.Equal(0.1, current.Ampere, 1e-15);
        foreach (double ampere in new[] { current.LowAmpere, current.HighAmpere })
        {
            double distance = 10 - (ampere * 100);
            double variance = (0.02 * 0.02) - (2 * ampere * 0.6 * 0.02 * 8) + (ampere * ampere * 64);
            Assert.Equal(4 * variance, distance * distance, 1e-12);
        }

        Assert.True(current.HighAmpere - current.Ampere > current.Ampere - current.LowAmpere);
    }

    [Fact]
    public void The_smallest_load_keeps_the_stated_loss()
    {
        // Common practice: ten times Rth loses 1/11.
        Uncertain load = DerivedQuantities.SmallestLoad(Of(10, 600, 0.01, 2, 0), 1.0 / 11);
        Assert.Equal(6000, load.Value, 1e-9);
        Assert.Equal(20, load.StandardUncertainty, 1e-9);
    }

    private static Estimate Of(double volt, double ohm, double uVolt, double uOhm, double correlation) =>
        new(volt, ohm, uVolt, uOhm, correlation, 2, 2, 1, 1, 0.3, []);
}
