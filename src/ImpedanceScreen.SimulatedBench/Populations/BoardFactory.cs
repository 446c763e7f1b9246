using ImpedanceScreen.SimulatedBench.Randomness;

namespace ImpedanceScreen.SimulatedBench.Populations;

/// <summary>Makes boards: the truth depends on seed and ordinal alone.</summary>
/// <param name="population">The population.</param>
/// <param name="seed">The bench's seed.</param>
/// <param name="firstLabel">Serial number of the first board; its trailing digits count on.</param>
public sealed class BoardFactory(Population population, ulong seed, string firstLabel)
{
    /// <summary>Makes a board.</summary>
    /// <param name="ordinal">Its number, from 1.</param>
    public SimulatedBoard Make(long ordinal)
    {
        (DefectShare Share, string Output, double Size)? defect = DrawDefect(ordinal);
        return new SimulatedBoard(
            ordinal,
            SerialLabel.After(firstLabel, ordinal - 1),
            [.. population.Sources.Select(source => DrawSource(source, ordinal, defect))]);
    }

    private (DefectShare Share, string Output, double Size)? DrawDefect(long ordinal)
    {
        var random = new KeyedRandom(seed, ordinal, "defect");
        if (random.Uniform() >= population.DefectiveShare)
        {
            return null;
        }

        double pick = random.Between(0.0, population.Defects.Sum(defect => defect.Weight));
        DefectShare chosen = population.Defects[^1];
        foreach (DefectShare defect in population.Defects)
        {
            if (pick < defect.Weight)
            {
                chosen = defect;
                break;
            }

            pick -= defect.Weight;
        }

        string output = chosen.Outputs[(int)(random.Uniform() * chosen.Outputs.Count)];
        return (chosen, output, random.Between(chosen.Size.Min, chosen.Size.Max));
    }

    private TrueSource DrawSource(
        SourcePopulation source, long ordinal, (DefectShare Share, string Output, double Size)? defect)
    {
        var random = new KeyedRandom(seed, ordinal, "source", source.Output, source.State);
        var healthy = new TrueSource(
            source.Output,
            source.State,
            Clamp(random.Normal(source.VoltageMeanVolt, source.VoltageDeviationVolt), source.SaturationVolt),
            Math.Max(0.0, random.Normal(source.ResistanceMeanOhm, source.ResistanceDeviationOhm)),
            source.CapacitanceFarad,
            source.CurrentLimitAmpere,
            NoiseVolt: 0.0,
            Defect: null);
        return defect is { } hit && hit.Output == source.Output && (hit.Share.State ?? source.State) == source.State
            ? Spoil(healthy, hit.Share.Kind, hit.Size)
            : healthy;
    }

    private static TrueSource Spoil(TrueSource healthy, DefectKind kind, double size)
    {
        TrueSource spoilt = kind switch
        {
            DefectKind.WrongResistance => healthy with { ResistanceOhm = size * healthy.ResistanceOhm },
            DefectKind.WrongVoltage => healthy with { VoltageVolt = size * healthy.VoltageVolt },
            DefectKind.Dead => healthy with { VoltageVolt = 0.0 },
            DefectKind.Shorted => healthy with { VoltageVolt = 0.0, ResistanceOhm = size },
            // The joint lies outside the board's own capacitance.
            DefectKind.OpenJoint => healthy with
            {
                ResistanceOhm = healthy.ResistanceOhm + size, CapacitanceFarad = 0.0,
            },
            DefectKind.WeakBuffer => healthy with { CurrentLimitAmpere = size },
            DefectKind.RailSaturation => healthy with { VoltageVolt = Clamp(healthy.VoltageVolt, size) },
            _ => healthy with { NoiseVolt = size },
        };
        return spoilt with { Defect = kind };
    }

    private static double Clamp(double voltageVolt, double? saturationVolt) =>
        saturationVolt is { } rail ? Math.Clamp(voltageVolt, -rail, rail) : voltageVolt;
}
