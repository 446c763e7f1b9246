using System.Text.Json;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>An estimate with its budget within a board's body; the budget stands as one list a column.</summary>
internal static class EstimateBody
{
    public static void Write(CanonicalWriter writer, Estimate? estimate)
    {
        if (estimate is null)
        {
            writer.Null();
            return;
        }

        writer.StartObject();
        writer.Name("budget");
        WriteBudget(writer, estimate.Budget);
        writer.Number("chi_squared", estimate.ChiSquared);
        writer.Number("correlation", estimate.Correlation);
        writer.Integer("dof", estimate.DegreesOfFreedom);
        writer.Number("k_rth", estimate.InternalResistanceCoverage);
        writer.Number("k_vth", estimate.SourceVoltageCoverage);
        writer.Number("p_value", estimate.PValue);
        writer.Number("rth_ohm", estimate.InternalResistanceOhm);
        writer.Number("u_rth_ohm", estimate.InternalResistanceUncertaintyOhm);
        writer.Number("u_vth_v", estimate.SourceVoltageUncertaintyVolt);
        writer.Number("vth_v", estimate.SourceVoltageVolt);
        writer.EndObject();
    }

    public static Estimate Read(JsonElement estimate) => new(
        estimate.Number("vth_v"),
        estimate.Number("rth_ohm"),
        estimate.Number("u_vth_v"),
        estimate.Number("u_rth_ohm"),
        estimate.Number("correlation"),
        estimate.Number("k_vth"),
        estimate.Number("k_rth"),
        estimate.Number("chi_squared"),
        estimate.Integer("dof"),
        estimate.Number("p_value"),
        ReadBudget(estimate.Object("budget") ?? throw new FormatException("'budget' is null.")));

    private static void WriteBudget(CanonicalWriter writer, IReadOnlyList<BudgetTerm> terms)
    {
        writer.StartObject();
        writer.List("distribution", terms, (w, term) => w.String(Words<InputDistribution>.Of(term.Distribution)));

        // Known exactly is infinitely many degrees of freedom, and that is no JSON number.
        writer.List("dof", terms, (w, term) => w.NumberOrNull(
            double.IsPositiveInfinity(term.DegreesOfFreedom) ? null : term.DegreesOfFreedom));
        writer.List("name", terms, (w, term) => w.String(term.Name));
        writer.List("rth_ohm", terms, (w, term) => w.NumberOrNull(term.InternalResistanceOhm));
        writer.List("type", terms, (w, term) => w.String(Words<EvaluationType>.Of(term.Type)));
        writer.List("vth_v", terms, (w, term) => w.NumberOrNull(term.SourceVoltageVolt));
        writer.EndObject();
    }

    private static List<BudgetTerm> ReadBudget(JsonElement budget)
    {
        List<string?> names = budget.List("name", item => item.GetString());
        List<string?> types = budget.List("type", item => item.GetString());
        List<string?> distributions = budget.List("distribution", item => item.GetString());
        List<double> volts = budget.List("vth_v", item => item.NumberOrNaN());
        List<double> ohms = budget.List("rth_ohm", item => item.NumberOrNaN());
        List<double> freedoms = budget.List("dof", item => item.NumberOrNaN());
        int count = names.Count;
        if (types.Count != count || distributions.Count != count || volts.Count != count || ohms.Count != count
            || freedoms.Count != count)
        {
            throw new FormatException("The lists of 'budget' are of different length.");
        }

        var terms = new List<BudgetTerm>(count);
        for (int at = 0; at < count; at++)
        {
            terms.Add(new BudgetTerm(
                names[at] ?? throw new FormatException("A name in 'budget' is null."),
                Words<EvaluationType>.Parse(types[at] ?? string.Empty),
                Words<InputDistribution>.Parse(distributions[at] ?? string.Empty),
                volts[at],
                ohms[at],
                double.IsNaN(freedoms[at]) ? double.PositiveInfinity : freedoms[at]));
        }

        return terms;
    }
}
