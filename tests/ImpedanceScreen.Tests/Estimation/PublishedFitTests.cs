using System.Globalization;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Tests.Estimation;

/// <summary>Fits with published results.</summary>
public sealed class PublishedFitTests
{
    /// <summary>
    /// NIST StRD, nonlinear regression, Misra1d: y = b1 b2 x/(1 + b2 x) is a source on loads x with Vth = b1, Rth =
    /// 1/b2.
    /// Certified values for equal, unknown uncertainties; NaN stands for the estimator's own start.
    /// </summary>
    [Theory]
    [InlineData(double.NaN, double.NaN)]
    [InlineData(500, 0.0001)]
    [InlineData(450, 0.0003)]
    public void Misra1d_of_NIST_StRD_is_met_to_nine_digits(double startB1, double startB2)
    {
        FitCase data = Misra1d();
        SourceFit fit = double.IsNaN(startB1)
            ? SourceFitter.Fit(data.Problem)
            : SourceFitter.Fit(data.Problem, startB1, 1 / startB2);
        Assert.True(fit.Converged);
        SourceFit unknown = SourceFitter.WithUncertaintiesUnknown(fit);
        double b2 = 1 / unknown.ResistanceOhm;
        AssertDigits(4.3736970754E+02, unknown.SourceVoltageVolt);
        AssertDigits(3.0227324449E-04, b2);
        AssertDigits(3.6489174345E+00, Math.Sqrt(unknown.VoltageVariance));
        AssertDigits(2.9334354479E-06, Math.Sqrt(unknown.ResistanceVariance) * b2 * b2);
        AssertDigits(5.6419295283E-02, unknown.ChiSquared);
        Assert.Equal(12, unknown.DegreesOfFreedom);
        Assert.True(double.IsNaN(unknown.PValue));
    }

    /// <summary>Two-load method of battery standards: IEC 60896-21, from memory.</summary>
    [Theory]
    [InlineData(12.6, 0.05, 2.0, 0.5)]
    [InlineData(-3.3, 47, 1000, 100)]
    public void Two_loads_give_the_two_load_formula(double vth, double rth, double light, double heavy)
    {
        double v1 = (vth * light / (light + rth)) + 1e-3;
        double v2 = (vth * heavy / (heavy + rth)) - 1e-3;
        SourceFit fit = SourceFitter.Fit(Case([light, heavy], [v1, v2]).Problem);
        double i1 = v1 / light;
        double i2 = v2 / heavy;
        double ohm = (v1 - v2) / (i2 - i1);
        Assert.Equal(ohm, fit.ResistanceOhm, Math.Abs(ohm) * 1e-12);
        Assert.Equal(v1 + (ohm * i1), fit.SourceVoltageVolt, Math.Abs(vth) * 1e-12);
        Assert.Equal(0, fit.DegreesOfFreedom);
        Assert.True(double.IsNaN(fit.PValue));
    }

    /// <summary>
    /// Common practice: a load equal to Rth halves the voltage, ten times Rth loses 1/11, a hundred times 1/101.
    /// </summary>
    [Theory]
    [InlineData(1, 1.0 / 2)]
    [InlineData(10, 1.0 / 11)]
    [InlineData(100, 1.0 / 101)]
    public void A_load_loses_what_every_textbook_says(double times, double loss)
    {
        const double Vth = 10;
        const double Rth = 600;
        double[] volts = [Vth, Vth * (1 - loss)];
        FitCase data = Case([times * Rth], volts);
        SourceFit fit = SourceFitter.Fit(data.Problem);
        Assert.Equal(Vth, fit.SourceVoltageVolt, 1e-12);
        Assert.Equal(Rth, fit.ResistanceOhm, Rth * 1e-11);
    }

    [Fact]
    public void Scaling_all_voltages_scales_the_source_voltage_and_leaves_the_resistance()
    {
        for (int seed = 0; seed < 50; seed++)
        {
            FitCase one = FitCase.Draw(new Random(seed), (seed % 2) * 5);
            FitCase scaled = Scale(one, -8);
            SourceFit fit = SourceFitter.Fit(one.Problem);
            SourceFit other = SourceFitter.Fit(scaled.Problem);
            Assert.Equal(-8 * fit.SourceVoltageVolt, other.SourceVoltageVolt, 1e-9);
            Assert.Equal(fit.ResistanceOhm, other.ResistanceOhm, fit.ResistanceOhm * 1e-9);
            Assert.Equal(fit.ChiSquared, other.ChiSquared, 1e-6);
        }
    }

    [Fact]
    public void Shifting_source_and_return_together_shifts_the_source_voltage_only()
    {
        for (int seed = 0; seed < 50; seed++)
        {
            FitCase drawn = FitCase.Draw(new Random(seed)) with { MeterSiemens = 0 };
            FitCase shifted = drawn with
            {
                ReturnVolt = 7,
                Points = [.. drawn.Points.Select(point => point with { Volt = point.Volt + 7 })],
            };
            SourceFit fit = SourceFitter.Fit(drawn.Problem);
            SourceFit other = SourceFitter.Fit(shifted.Problem);
            Assert.Equal(fit.SourceVoltageVolt + 7, other.SourceVoltageVolt, 1e-10);
            Assert.Equal(fit.ResistanceOhm, other.ResistanceOhm, fit.ResistanceOhm * 1e-9);
        }
    }

    [Fact]
    public void Without_load_current_there_is_no_estimate()
    {
        SourceFit fit = SourceFitter.Fit(Case([1000, 100], [0, 0]).Problem);
        Assert.False(fit.Converged);
    }

    [Fact]
    public void A_problem_out_of_order_is_refused()
    {
        FitCase data = Case([1000, 100], [5, 4.5]);
        Assert.Throws<ArgumentException>(() =>
            SourceFitter.Fit((data with { Points = [.. data.Points.Reverse()] }).Problem));
        Assert.Throws<ArgumentException>(() => SourceFitter.Fit((data with { Points = [data.Points[0]] }).Problem));
    }

    [Fact]
    public void An_estimate_allocates_nothing()
    {
        FitCase drawn = FitCase.Draw(new Random(1));
        double sum = SourceFitter.Fit(drawn.Problem).PValue;
        long before = GC.GetAllocatedBytesForCurrentThread();
        for (int i = 0; i < 100; i++)
        {
            sum += SourceFitter.Fit(drawn.Problem).PValue;
        }

        Assert.Equal(0, GC.GetAllocatedBytesForCurrentThread() - before);
        Assert.True(double.IsFinite(sum));
    }

    // Unloaded first where there is one reading more than loads.
    private static FitCase Case(double[] ohms, double[] volts) => new(
        [.. volts.Select((volt, i) => new FitPoint(volt, 1, i - (volts.Length - ohms.Length)))],
        [.. ohms.Select(ohm => new FitLoad(ohm, 0))], [], 0);

    private static FitCase Scale(FitCase drawn, double factor) => drawn with
    {
        Points = [.. drawn.Points.Select(point => point with
        {
            Volt = point.Volt * factor,
            StandardUncertaintyVolt = point.StandardUncertaintyVolt * Math.Abs(factor),
        })],
        ReturnVolt = drawn.ReturnVolt * factor,
        ReturnUncertaintyVolt = drawn.ReturnUncertaintyVolt * Math.Abs(factor),
        OffsetUncertaintyVolt = drawn.OffsetUncertaintyVolt * Math.Abs(factor),
    };

    private static FitCase Misra1d()
    {
        string path = Path.Combine(AppContext.BaseDirectory, "Estimation", "Data", "Misra1d.dat");
        double[][] rows = [.. File.ReadLines(path)
            .SkipWhile(line => !line.StartsWith("Data:   y", StringComparison.Ordinal)).Skip(1)
            .Where(line => line.Length > 0)
            .Select(line => line.Split(' ', StringSplitOptions.RemoveEmptyEntries)
                .Select(text => double.Parse(text, CultureInfo.InvariantCulture)).ToArray())];
        Assert.Equal(14, rows.Length);
        return Case([.. rows.Select(row => row[1])], [.. rows.Select(row => row[0])]);
    }

    // Nine digits: half a unit of the ninth.
    private static void AssertDigits(double certified, double actual) =>
        Assert.True(Math.Abs(actual - certified) < 5e-10 * Math.Abs(certified), $"{certified:R} and {actual:R}");
}
