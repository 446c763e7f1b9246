using ImpedanceScreen.Files;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.SimulatedBench.Populations;

/// <summary>Binds population files. Every key is documented in <c>fixtures/POPULATIONS.md</c>.</summary>
public static class PopulationFileBinder
{
    /// <summary>The word that a population file's <c>kind</c> is.</summary>
    public const string Kind = "population";

    private const string NameCure = "write the name as it stands in the limit file";

    /// <summary>Binds a file and compares it with the limit file whose boards it describes.</summary>
    public static Checked<Population> Bind(FileText file, LimitFile limits)
    {
        ArgumentNullException.ThrowIfNull(limits);
        return FileBinder.Bind(file, Kind, reader => Read(file, reader, limits));
    }

    private static Population Read(FileText file, MappingReader reader, LimitFile limits)
    {
        string product = reader.Text("product");
        if (reader.Bound("product") && product != limits.Product)
        {
            reader.Mistake("product", $"the limit file is for `{limits.Product}`", "name files of one product");
        }

        Population population = new(
            file,
            product,
            reader.Mapping("bench", ReadSurroundings),
            reader.Number("defective_share", NumberRange.UpTo(1.0)),
            reader.Mappings("defects", 0, defect => ReadDefect(defect, limits)),
            reader.Mappings("sources", 1, source => ReadSource(source, limits)));
        if (reader.Bound("defective_share", "defects") && population is { DefectiveShare: > 0.0, Defects.Count: 0 })
        {
            reader.Mistake("defects", "no defect is declared", "declare one, or set `defective_share: 0`");
        }

        if (reader.Bound("sources"))
        {
            CheckComplete(reader, population, limits);
        }

        return population;
    }

    private static Surroundings ReadSurroundings(MappingReader reader) => new(
        reader.Number("temperature_deg_c", new NumberRange(-20.0, 70.0)),
        reader.Number("temperature_deviation_deg_c", NumberRange.UpTo(10.0)),
        reader.Duration("meter_turnaround_ms", NumberRange.UpTo(1000.0)),
        reader.Duration("handler_ms", NumberRange.UpTo(60_000.0)));

    private static DefectShare ReadDefect(MappingReader reader, LimitFile limits)
    {
        DefectKind kind = reader.Word("kind", [.. DefectNames.All.Select(entry => (entry.Name, entry.Kind))]);
        string? sizeKey = reader.Bound("kind") ? DefectNames.All.First(entry => entry.Kind == kind).SizeKey : null;
        DefectShare defect = new(
            kind,
            reader.Number("weight", NumberRange.Positive),
            reader.Texts("outputs", 1),
            reader.OptionalText("state"),
            sizeKey is null ? default : reader.Mapping(sizeKey, ReadSize));
        foreach (string unknown in defect.Outputs.Where(name => limits.Outputs.All(output => output.Name != name)))
        {
            reader.Mistake("outputs", $"no output `{unknown}` in the limit file", NameCure);
        }

        if (defect.State is { } state && reader.Bound("outputs")
            && !defect.Outputs.All(output => StateNames(limits, output).Contains(state)))
        {
            reader.Mistake("state", $"not every output has a drive state `{state}`", NameCure);
        }

        return defect;
    }

    private static Window ReadSize(MappingReader reader)
    {
        Window size = new(reader.Number("min", NumberRange.Positive), reader.Number("max", NumberRange.Positive));
        if (reader.Bound("min", "max") && size.Min > size.Max)
        {
            reader.Mistake("min", "above `max`", "swap the two");
        }

        return size;
    }

    private static SourcePopulation ReadSource(MappingReader reader, LimitFile limits)
    {
        SourcePopulation source = new(
            reader.Text("output"),
            reader.Text("state"),
            reader.Number("voltage_mean_v", new NumberRange(-60.0, 60.0)),
            reader.Number("voltage_deviation_v", NumberRange.ZeroOrMore),
            reader.Number("resistance_mean_ohm", NumberRange.ZeroOrMore),
            reader.Number("resistance_deviation_ohm", NumberRange.ZeroOrMore),
            reader.Number("capacitance_nf", NumberRange.ZeroOrMore) * 1e-9,
            reader.OptionalNumber("current_limit_a", NumberRange.Positive),
            reader.OptionalNumber("saturation_v", NumberRange.Positive));
        if (reader.Bound("output", "state") && !StateNames(limits, source.Output).Contains(source.State))
        {
            reader.Mistake("state", $"the limit file has no `{source.Output}` in state `{source.State}`", NameCure);
        }

        return source;
    }

    private static void CheckComplete(MappingReader reader, Population population, LimitFile limits)
    {
        foreach (OutputLimits output in limits.Outputs)
        {
            foreach (DriveState state in output.States)
            {
                int count = population.Sources.Count(
                    source => source.Output == output.Name && source.State == state.Name);
                if (count != 1)
                {
                    reader.Mistake(
                        "sources", $"`{output.Name}` in state `{state.Name}` is described {count} times",
                        "describe each output and drive state of the limit file once");
                }
            }
        }
    }

    private static IEnumerable<string> StateNames(LimitFile limits, string output) =>
        limits.Outputs.Where(each => each.Name == output).SelectMany(each => each.States).Select(state => state.Name);
}
