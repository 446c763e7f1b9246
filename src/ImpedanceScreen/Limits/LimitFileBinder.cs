using ImpedanceScreen.Files;

namespace ImpedanceScreen.Limits;

/// <summary>Binds limit files. Every key is documented in <c>limits/README.md</c>.</summary>
public static class LimitFileBinder
{
    /// <summary>The word that a limit file's <c>kind</c> is.</summary>
    public const string Kind = "limits";

    /// <summary>Highest DC voltage within the program's scope, V.</summary>
    public const double HighestVoltageVolt = 60.0;

    /// <summary>Highest AC voltage within the program's scope, V rms.</summary>
    public const double HighestVoltageVoltAcRms = 25.0;

    private const string ScopeCure =
        "screen this product on other equipment; the bound is the program's scope and says nothing about safety below it";

    /// <summary>Binds a file: the limit file, or every mistake in it.</summary>
    public static Checked<LimitFile> Bind(FileText file) =>
        FileBinder.Bind(file, Kind, reader => Read(file, reader));

    private static LimitFile Read(FileText file, MappingReader reader)
    {
        double ceiling = Ceiling(reader);
        NameTable outputs = new("output");
        LimitFile limits = new(
            file,
            reader.Text("product"),
            reader.Text("revision"),
            SerialPattern(reader),
            ceiling,
            reader.Word("undecided", ("retest", UndecidedRule.Retest), ("fail", UndecidedRule.Fail)),
            reader.Mappings("outputs", 1, output => Output(output, outputs, ceiling)),
            AcCeiling(reader));
        outputs.Check();
        return limits;
    }

    private static OutputLimits Output(MappingReader reader, NameTable outputs, double ceiling)
    {
        NameTable states = new("drive state");
        OutputLimits output = new(
            outputs.Declare(reader),
            reader.Mappings("states", 1, state => DriveStateReader.Read(state, states, ceiling)));
        states.Check();
        return output;
    }

    private static double Ceiling(MappingReader reader)
    {
        double ceiling = reader.Number("voltage_ceiling_v", NumberRange.Positive);
        if (ceiling > HighestVoltageVolt)
        {
            reader.Mistake("voltage_ceiling_v", "above 60 V DC, beyond extra-low voltage", ScopeCure);
        }

        return ceiling;
    }

    private static double? AcCeiling(MappingReader reader)
    {
        double? ceiling = reader.OptionalNumber("voltage_ceiling_v_ac_rms", NumberRange.Positive);
        if (ceiling > HighestVoltageVoltAcRms)
        {
            reader.Mistake("voltage_ceiling_v_ac_rms", "above 25 V AC rms, beyond extra-low voltage", ScopeCure);
        }

        return ceiling;
    }

    private static string SerialPattern(MappingReader reader)
    {
        string pattern = reader.Text("serial_pattern");
        try
        {
            SerialNumber.Compile(pattern);
        }
        catch (ArgumentException error)
        {
            reader.Mistake(
                "serial_pattern", "not a regular expression: " + error.Message, "correct it, as `T6-[0-9]{6}`");
        }
        catch (NotSupportedException)
        {
            reader.Mistake(
                "serial_pattern", "uses a construct that can take for ever (look-around, back-reference, atomic group)",
                "write the pattern without it");
        }

        return pattern;
    }
}
