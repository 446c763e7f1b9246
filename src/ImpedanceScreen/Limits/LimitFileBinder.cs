using ImpedanceScreen.Files;

namespace ImpedanceScreen.Limits;

/// <summary>Binds limit files. Every key is documented in <c>limits/README.md</c>.</summary>
public static class LimitFileBinder
{
    /// <summary>The word that a limit file's <c>kind</c> is.</summary>
    public const string Kind = "limits";

    /// <summary>Binds a file: the limit file, or every mistake in it.</summary>
    public static Checked<LimitFile> Bind(FileText file) =>
        FileBinder.Bind(file, Kind, reader => Read(file, reader));

    private static LimitFile Read(FileText file, MappingReader reader)
    {
        double ceiling = ExtraLowVoltage.Dc(
            reader, "voltage_ceiling_v", reader.Number("voltage_ceiling_v", NumberRange.Positive));
        NameTable outputs = new("output");
        LimitFile limits = new(
            file,
            reader.Text("product"),
            reader.Text("revision"),
            SerialPattern(reader),
            ceiling,
            reader.Word("undecided", ("retest", UndecidedRule.Retest), ("fail", UndecidedRule.Fail)),
            reader.Mappings("outputs", 1, output => Output(output, outputs, ceiling)),
            ExtraLowVoltage.AcRms(
                reader, "voltage_ceiling_v_ac_rms",
                reader.OptionalNumber("voltage_ceiling_v_ac_rms", NumberRange.Positive)));
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
                "serial_pattern",
                "can take for ever (look-around, back-reference, atomic group or a huge repetition)",
                "write the pattern without it");
        }

        return pattern;
    }
}
