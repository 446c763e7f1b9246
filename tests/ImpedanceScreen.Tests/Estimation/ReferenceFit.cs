using ImpedanceScreen.Estimation;
using MathNet.Numerics;
using MathNet.Numerics.LinearAlgebra;
using MathNet.Numerics.Optimization;

namespace ImpedanceScreen.Reference;

/// <summary>
/// The estimator's objective handed to MathNet.Numerics' Levenberg-Marquardt: Vth, resistance, every load's own error
/// and every common term are parameters; the priors stand as pseudo-observations below the readings.
/// </summary>
internal sealed class ReferenceFit
{
    private readonly FitCase source;
    private readonly int commons;
    private readonly int offsetAt;
    private readonly int returnAt;
    private readonly int commonAt;
    private readonly int loadAt;
    private readonly int parameters;

    public ReferenceFit(FitCase source)
    {
        this.source = source;
        commons = source.CommonCount;
        int next = 2;
        offsetAt = source.OffsetUncertaintyVolt > 0 ? next++ : -1;
        returnAt = source.ReturnUncertaintyVolt > 0 ? next++ : -1;
        commonAt = next;
        loadAt = commonAt + commons;
        parameters = loadAt + source.Loads.Length;
    }

    /// <summary>Minimises from a start; loads and common terms start at their stated values.</summary>
    public (double Volt, double Ohm, double ChiSquared, Matrix<double> Covariance) Fit(double startVolt,
        double startOhm)
    {
        int rows = source.Points.Length + parameters - 2;
        Vector<double> axis = Vector<double>.Build.Dense(rows, i => i);
        Vector<double> observed = Vector<double>.Build.Dense(
            rows, i => i < source.Points.Length ? source.Points[i].Volt / source.Points[i].StandardUncertaintyVolt : 0);
        IObjectiveModel objective = ObjectiveFunction.NonlinearModel(Predict, Differentiate, axis, observed);
        var start = Vector<double>.Build.Dense(parameters);
        start[0] = startVolt;
        start[1] = startOhm;
        var minimiser = new LevenbergMarquardtMinimizer(
            gradientTolerance: 1e-18, stepTolerance: 1e-18, functionTolerance: 1e-22, maximumIterations: 1000);
        NonlinearMinimizationResult result = minimiser.FindMinimum(objective, start);
        Matrix<double> jacobian = Differentiate(result.MinimizingPoint, axis);
        Vector<double> point = result.MinimizingPoint;
        double chiSquared = (observed - Predict(point, axis)).PointwisePower(2).Sum();


        // (JᵀJ)⁻¹ by way of QR, since the product squares the condition of J.
        Matrix<double> inverse = jacobian.QR(MathNet.Numerics.LinearAlgebra.Factorization.QRMethod.Thin).R.Inverse();
        return (point[0], point[1], chiSquared, inverse.TransposeAndMultiply(inverse));
    }

    /// <summary>The upper tail of chi-squared by MathNet's regularised incomplete gamma function.</summary>
    public double PValue(double chiSquared) =>
        SpecialFunctions.GammaUpperRegularized(0.5 * (source.Points.Length - 2), 0.5 * chiSquared);

    private Vector<double> Predict(Vector<double> p, Vector<double> axis)
    {
        Vector<double> rows = Vector<double>.Build.Dense(axis.Count);
        for (int i = 0; i < source.Points.Length; i++)
        {
            FitPoint point = source.Points[i];
            (double g, double back) = Circuit(p, point.Load);
            double volt = (p[0] + (p[1] * back * g)) / (1 + (p[1] * (g + source.MeterSiemens)));
            rows[i] = (volt + Offset(p)) / point.StandardUncertaintyVolt;
        }

        for (int k = 2; k < parameters; k++)
        {
            rows[source.Points.Length + k - 2] = p[k];
        }

        return rows;
    }

    private Matrix<double> Differentiate(Vector<double> p, Vector<double> axis)
    {
        Matrix<double> jacobian = Matrix<double>.Build.Dense(axis.Count, parameters);
        for (int i = 0; i < source.Points.Length; i++)
        {
            FitPoint point = source.Points[i];
            double u = point.StandardUncertaintyVolt;
            (double g, double back) = Circuit(p, point.Load);
            double divider = 1 + (p[1] * (g + source.MeterSiemens));
            double top = p[0] + (p[1] * back * g);
            double perReturn = p[1] * g / divider / u;
            double perSiemens = ((p[1] * back * divider) - (top * p[1])) / (divider * divider) / u;
            jacobian[i, 0] = 1 / divider / u;
            jacobian[i, 1] = ((back * g * divider) - (top * (g + source.MeterSiemens))) / (divider * divider) / u;
            if (offsetAt > 0)
            {
                double shared = source.ReturnSharesOffset ? perReturn : 0;
                jacobian[i, offsetAt] = source.OffsetUncertaintyVolt * ((1 / u) - shared);
            }

            if (returnAt > 0)
            {
                jacobian[i, returnAt] = source.ReturnUncertaintyVolt * perReturn;
            }

            if (point.Load >= 0)
            {
                for (int k = 0; k < commons; k++)
                {
                    jacobian[i, commonAt + k] = -g * g * perSiemens * source.CommonOhm[(point.Load * commons) + k];
                }

                jacobian[i, loadAt + point.Load] = -g * g * perSiemens * source.Loads[point.Load].IndividualOhm;
            }
        }

        for (int k = 2; k < parameters; k++)
        {
            jacobian[source.Points.Length + k - 2, k] = 1;
        }

        return jacobian;
    }

    private double Offset(Vector<double> p) => offsetAt > 0 ? source.OffsetUncertaintyVolt * p[offsetAt] : 0;

    private (double Siemens, double Back) Circuit(Vector<double> p, int load)
    {
        double back = source.ReturnVolt - (source.ReturnSharesOffset ? Offset(p) : 0);
        back += returnAt > 0 ? source.ReturnUncertaintyVolt * p[returnAt] : 0;
        if (load < 0)
        {
            return (0, back);
        }

        double ohm = source.Loads[load].Ohm + (source.Loads[load].IndividualOhm * p[loadAt + load]);
        for (int k = 0; k < commons; k++)
        {
            ohm += source.CommonOhm[(load * commons) + k] * p[commonAt + k];
        }

        return (1 / ohm, back);
    }
}
