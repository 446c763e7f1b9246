using ImpedanceScreen.Files;

namespace ImpedanceScreen.Limits;

/// <summary>The program's own scope: extra-low voltage only. No statement that anything below is safe.</summary>
public static class ExtraLowVoltage
{
    /// <summary>Highest DC voltage, V.</summary>
    public const double HighestVolt = 60.0;

    /// <summary>Highest AC voltage, V rms.</summary>
    public const double HighestVoltAcRms = 25.0;

    private const string Cure =
        "use other equipment: this is the bound of the program's scope, no statement that anything below is safe";

    /// <summary>Notes a mistake where the value of a key, either sign, lies beyond the scope.</summary>
    internal static double Dc(MappingReader reader, string key, double volt)
    {
        if (Math.Abs(volt) > HighestVolt)
        {
            reader.Mistake(key, "above 60 V DC, beyond extra-low voltage", Cure);
        }

        return volt;
    }

    /// <summary>Notes a mistake where the value of a key lies beyond the scope.</summary>
    internal static double? AcRms(MappingReader reader, string key, double? volt)
    {
        if (volt > HighestVoltAcRms)
        {
            reader.Mistake(key, "above 25 V AC rms, beyond extra-low voltage", Cure);
        }

        return volt;
    }
}
