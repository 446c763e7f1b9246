using CsCheck;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Tests.Quantities;

public sealed class RoundingTests
{
    [Theory]
    [InlineData(123456789.49, 9, 123456789)]
    [InlineData(1.5, 1, 2)]
    [InlineData(-0.000123455, 4, -0.0001235)]
    [InlineData(9.9999, 2, 10)]
    [InlineData(-0.0, 9, 0)]
    public void A_value_is_rounded_to_its_significant_digits(double value, int digits, double expected) =>
        Assert.Equal(expected, Rounding.Significant(value, digits));

    [Fact]
    public void What_is_not_finite_stays_as_it_is()
    {
        Assert.True(double.IsNaN(Rounding.Significant(double.NaN, 9)));
        Assert.Equal(double.PositiveInfinity, Rounding.Significant(double.PositiveInfinity, 9));
        Assert.False(double.IsNegative(Rounding.Significant(-0.0, 9)));
    }

    [Fact]
    public void Rounding_again_changes_nothing_and_the_error_is_at_most_half_a_unit() =>
        Gen.Select(Gen.Double[-1e12, 1e12], Gen.Int[-300, 280], Gen.Int[1, 15]).Sample((mantissa, power, digits) =>
        {
            double value = mantissa * Math.Pow(10, power);
            double once = Rounding.Significant(value, digits);
            Assert.Equal(once, Rounding.Significant(once, digits));
            Assert.True(Math.Abs(once - value) <= Math.Abs(value) * 0.5000001 * Math.Pow(10, 1 - digits));
        }, threads: 1);

    [Theory]
    [InlineData(2.49983, 0.001234, "2.4998 ± 0.0012 V")]
    [InlineData(0.0123456, 0.00002, "12.346 ± 0.020 mV")]
    [InlineData(-4.9996, 0.0996, "-5.00 ± 0.10 V")]
    [InlineData(0, 0.0031, "0.0 ± 3.1 mV")]
    [InlineData(-0.00001, 0.0031, "0.0 ± 3.1 mV")]
    [InlineData(5, 0, "5 V")]
    public void A_voltage_stands_beside_its_uncertainty(double value, double expanded, string text) =>
        Assert.Equal(text, UncertainText.Voltage(value, expanded));

    [Theory]
    [InlineData(50.123, 0.314, "50.12 ± 0.31 Ω")]
    [InlineData(10012.3, 314, "10.01 ± 0.31 kΩ")]
    [InlineData(0.0501, 0.0123, "50 ± 12 mΩ")]
    [InlineData(0.5012, 0.1234, "500 ± 120 mΩ")]
    [InlineData(-0.0021, 0.0154, "-2 ± 15 mΩ")]
    public void A_resistance_stands_beside_its_uncertainty(double value, double expanded, string text) =>
        Assert.Equal(text, UncertainText.Resistance(value, expanded));

    [Fact]
    public void Fractions_are_shown_in_percent_and_currents_scaled()
    {
        Assert.Equal("4.762 ± 0.030 %", UncertainText.Percent(0.04762, 0.0003));
        Assert.Equal("12.10 ± 0.20 mA", UncertainText.Current(0.0121, 0.0002));
        Assert.Equal("4.5 V", UncertainText.Voltage(4.5));
        Assert.Equal("3.3 kΩ", UncertainText.Resistance(3300));
    }
}
