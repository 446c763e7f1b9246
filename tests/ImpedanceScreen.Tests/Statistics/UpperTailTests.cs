using System.Globalization;
using System.Text.Json;
using ImpedanceScreen.Statistics;
using MathNet.Numerics;

namespace ImpedanceScreen.Tests.Statistics;

/// <summary>
/// Tail probabilities against published quantiles (NIST/SEMATECH e-Handbook of Statistical Methods 1.3.6.7,
/// recomputed to
/// 15 digits) and against MathNet.Numerics 5.0.0.
/// </summary>
public sealed class UpperTailTests
{
    private static readonly JsonElement Quantiles = JsonDocument.Parse(
        File.ReadAllText(Path.Combine(AppContext.BaseDirectory, "Statistics", "Data", "quantiles.json"))).RootElement;

    [Fact]
    public void Every_published_chi_squared_quantile_has_its_probability() =>
        ForEach("chi_square", (row, p, quantile) =>
            AssertRelative(1 - p, UpperTail.ChiSquared(quantile, row.GetProperty("df").GetInt32()), 1e-11));

    [Fact]
    public void Every_published_t_quantile_has_its_probability() =>
        ForEach("student_t", (row, p, quantile) =>
            AssertRelative(2 * (1 - p), UpperTail.StudentTwoSided(quantile, row.GetProperty("df").GetDouble()), 1e-9));

    [Fact]
    public void Every_published_normal_quantile_has_its_probability()
    {
        foreach (JsonElement row in Quantiles.GetProperty("normal").EnumerateArray())
        {
            double p = Number(row.GetProperty("p"));
            AssertRelative(1 - p, ErrorFunction.Normal(-Number(row.GetProperty("z"))), 1e-9);
        }
    }

    [Fact]
    public void The_error_function_agrees_with_MathNet_over_its_range()
    {
        for (double x = -6; x < 26; x += 0.0137)
        {
            AssertRelative(SpecialFunctions.Erfc(x), ErrorFunction.Complementary(x), 2e-13);
        }
    }

    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    [InlineData(5)]
    [InlineData(30)]
    public void The_far_tail_keeps_its_digits(int degrees)
    {
        for (double value = 0.01; value < 600; value *= 1.7)
        {
            AssertRelative(
                SpecialFunctions.GammaUpperRegularized(0.5 * degrees, 0.5 * value), UpperTail.ChiSquared(value,
                    degrees), 1e-10);
        }
    }

    [Fact]
    public void No_degree_of_freedom_has_no_probability() => Assert.True(double.IsNaN(UpperTail.ChiSquared(1, 0)));

    private static void ForEach(string table, Action<JsonElement, double, double> check)
    {
        foreach (JsonElement row in Quantiles.GetProperty(table).EnumerateArray())
        {
            foreach (JsonProperty cell in row.EnumerateObject().Where(cell => cell.Name != "df"))
            {
                check(row, double.Parse(cell.Name, CultureInfo.InvariantCulture), Number(cell.Value));
            }
        }
    }

    private static double Number(JsonElement text) => double.Parse(text.GetString()!, CultureInfo.InvariantCulture);

    private static void AssertRelative(double expected, double actual, double tolerance) =>
        Assert.True(Math.Abs(actual - expected) <= tolerance * expected, $"{expected:R} and {actual:R}");
}
