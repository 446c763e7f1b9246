using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>What follows from a recorded estimate, for people; its correlation is considered throughout.</summary>
public static class DerivedQuantities
{
    /// <summary>Voltage at a load, V.</summary>
    /// <param name="estimate">The estimate.</param>
    /// <param name="loadOhm">The load, Ω, above zero.</param>
    /// <param name="returnVolt">Voltage it returns to, V, taken as exact.</param>
    public static Uncertain VoltageAtLoad(Estimate estimate, double loadOhm, double returnVolt = 0)
    {
        ArgumentNullException.ThrowIfNull(estimate);
        var model = new SourceModel(
            estimate.SourceVoltageVolt, estimate.InternalResistanceOhm, returnVolt, 1 / loadOhm, 0);
        return new(model.Volt, Combine(estimate, model.PerSourceVolt, model.PerOhm));
    }

    /// <summary>
    /// The smallest load to common that keeps the voltage within a stated loss, Ω: Rth (1 - loss)/loss.
    /// </summary>
    /// <param name="estimate">The estimate.</param>
    /// <param name="loss">The loss as a fraction, above 0 and below 1.</param>
    public static Uncertain SmallestLoad(Estimate estimate, double loss)
    {
        ArgumentNullException.ThrowIfNull(estimate);
        ArgumentOutOfRangeException.ThrowIfLessThanOrEqual(loss, 0);
        ArgumentOutOfRangeException.ThrowIfGreaterThanOrEqual(loss, 1);
        double factor = (1 - loss) / loss;
        return new(estimate.InternalResistanceOhm * factor, estimate.InternalResistanceUncertaintyOhm * factor);
    }

    /// <summary>
    /// Equivalent short-circuit current Vth/Rth by calculation with its 95 % interval (E. C. Fieller, Journal of the
    /// Royal
    /// Statistical Society B 16, 1954); null, "not determined", where Rth is below three times its uncertainty. The
    /// real
    /// output limits earlier, and no output is ever shorted.
    /// </summary>
    public static ShortCircuitCurrent? ShortCircuit(Estimate estimate)
    {
        ArgumentNullException.ThrowIfNull(estimate);
        double volt = estimate.SourceVoltageVolt;
        double ohm = estimate.InternalResistanceOhm;
        double uVolt = estimate.SourceVoltageUncertaintyVolt;
        double uOhm = estimate.InternalResistanceUncertaintyOhm;
        if (!(ohm >= 3 * uOhm) || ohm == 0)
        {
            return null;
        }

        // All I with (Vth - I Rth)² <= k² (uV² - 2 I cov + I² uR²): between the roots of a quadratic that opens
        // upwards.
        double k = Math.Max(estimate.SourceVoltageCoverage, estimate.InternalResistanceCoverage);
        k = double.IsNaN(k) ? 0 : k;
        double squared = k * k;
        double both = estimate.Correlation * uVolt * uOhm;
        double a = (ohm * ohm) - (squared * uOhm * uOhm);
        double b = (volt * ohm) - (squared * both);
        double c = (volt * volt) - (squared * uVolt * uVolt);
        double root = Math.Sqrt(Math.Max(0, (b * b) - (a * c)));
        return new(volt / ohm, (b - root) / a, (b + root) / a);
    }

    private static double Combine(Estimate estimate, double perVolt, double perOhm)
    {
        double volt = perVolt * estimate.SourceVoltageUncertaintyVolt;
        double ohm = perOhm * estimate.InternalResistanceUncertaintyOhm;
        return Math.Sqrt(Math.Max(0, (volt * volt) + (ohm * ohm) + (2 * estimate.Correlation * volt * ohm)));
    }
}

/// <summary>An equivalent short-circuit current with its 95 % interval.</summary>
/// <param name="Ampere">Vth/Rth, A.</param>
/// <param name="LowAmpere">Lower end, A.</param>
/// <param name="HighAmpere">Upper end, A.</param>
public sealed record ShortCircuitCurrent(double Ampere, double LowAmpere, double HighAmpere);
