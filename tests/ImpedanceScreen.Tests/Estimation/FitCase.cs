using ImpedanceScreen.Estimation;

namespace ImpedanceScreen.Reference;

/// <summary>A fit problem that can be kept on the heap, and how random ones are drawn.</summary>
internal sealed record FitCase(
    FitPoint[] Points, FitLoad[] Loads, double[] CommonOhm, int CommonCount, double MeterSiemens = 0,
    double ReturnVolt = 0, double ReturnUncertaintyVolt = 0, double OffsetUncertaintyVolt = 0,
    bool ReturnSharesOffset = false)
{
    public FitProblem Problem => new()
    {
        Points = Points,
        Loads = Loads,
        CommonOhm = CommonOhm,
        CommonCount = CommonCount,
        MeterSiemens = MeterSiemens,
        ReturnVolt = ReturnVolt,
        ReturnUncertaintyVolt = ReturnUncertaintyVolt,
        OffsetUncertaintyVolt = OffsetUncertaintyVolt,
        ReturnSharesOffset = ReturnSharesOffset,
    };

    /// <summary>
    /// Six points (unloaded first, five loads) of a source with load, certificate and offset errors drawn from what the
    /// case declares.
    /// </summary>
    public static FitCase Draw(Random random, double returnVolt = 0)
    {
        double vth = returnVolt == 0 ? 1 + (9 * random.NextDouble()) : (2 * random.NextDouble()) - 1;
        double rth = 10 * Math.Pow(10, 2 * random.NextDouble());
        double meter = 1e-7;
        double offset = 20e-6;
        double certificate = Normal(random);
        double shift = Normal(random) * offset;
        double rail = returnVolt == 0 ? 0 : 1e-4;
        double back = returnVolt + (rail * Normal(random));
        double[] ratios = [30, 12, 5, 2.5, 1.2];
        var loads = new FitLoad[ratios.Length];
        double[] common = new double[ratios.Length];
        var points = new FitPoint[ratios.Length + 1];
        double noise = 5e-6 * (1 + random.NextDouble());
        points[0] = new((vth / (1 + (rth * meter))) + shift + (noise * Normal(random)), noise, -1);
        for (int i = 0; i < ratios.Length; i++)
        {
            double stated = rth * ratios[i] * (0.9 + (0.2 * random.NextDouble()));
            loads[i] = new(stated, stated * 1e-4);
            common[i] = stated * 5e-5;
            double g = 1 / (stated + (loads[i].IndividualOhm * Normal(random)) + (common[i] * certificate));
            double volt = (vth + (rth * back * g)) / (1 + (rth * (g + meter)));
            points[i + 1] = new(volt + shift + (noise * Normal(random)), noise, i);
        }

        return new(points, loads, common, 1, meter, returnVolt, rail, offset, returnVolt != 0);
    }

    /// <summary>A standard normal deviate (Box and Muller, Annals of Mathematical Statistics 29, 1958).</summary>
    public static double Normal(Random random) =>
        Math.Sqrt(-2 * Math.Log(1 - random.NextDouble())) * Math.Cos(2 * Math.PI * random.NextDouble());
}
