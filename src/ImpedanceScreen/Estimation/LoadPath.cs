using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// The path of one load as measured: the calibrated value brought to the temperature beside the loads and heated by its
/// own power, the branch and, for terminal sensing, the lead.
/// </summary>
internal sealed class LoadPath
{
    /// <summary>Forms the path.</summary>
    /// <param name="job">The output and state.</param>
    /// <param name="load">The load.</param>
    /// <param name="temperatureDegC">Temperature beside the loads; null where it was not measured.</param>
    /// <param name="ampere">Load current, A, for its power.</param>
    public LoadPath(StateJob job, Load load, Uncertain? temperatureDegC, double ampere)
    {
        Load = load;
        double temperature = (temperatureDegC ?? StateMeasurement.AssumedTemperatureDegC).Value;
        double warmer = temperature - load.CalibrationTemperatureDegC;
        double watt = ampere * ampere * load.ResistanceOhm;
        double change = (load.TemperatureCoefficientPerKelvin * warmer) + (load.SelfHeatingPerWatt * watt);
        double lead = job.Output.Sensing == Sensing.Terminal ? job.Output.LeadOhm.Value : 0;
        Ohm = (load.ResistanceOhm * (1 + change)) + load.BranchOhm.Value + lead;
        double whole = load.StandardUncertaintyOhm;
        CommonOhm = Math.Min(whole, load.CommonUncertaintyOhm ?? whole);
        CertificateOhm = Math.Sqrt((whole * whole) - (CommonOhm * CommonOhm));
        BranchOhm = load.BranchOhm.StandardUncertainty;
        OhmPerKelvin = load.ResistanceOhm * load.TemperatureCoefficientPerKelvin;
    }

    public Load Load { get; }

    /// <summary>The whole path, Ω.</summary>
    public double Ohm { get; }

    /// <summary>What the certificate leaves uncertain about this load alone, Ω.</summary>
    public double CertificateOhm { get; }

    /// <summary>What it leaves uncertain about all its loads alike, Ω.</summary>
    public double CommonOhm { get; }

    /// <summary>Standard uncertainty of the branch, Ω: each relay's own.</summary>
    public double BranchOhm { get; }

    /// <summary>Change with temperature, Ω/K.</summary>
    public double OhmPerKelvin { get; }

    /// <summary>Everything uncertain about this path alone, Ω.</summary>
    public double IndividualOhm => double.Hypot(CertificateOhm, BranchOhm);
}
