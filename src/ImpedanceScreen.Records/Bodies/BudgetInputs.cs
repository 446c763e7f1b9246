using System.Text.Json;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>
/// The inputs of all uncertainty budgets of a board, each once: budgets name an input by its place in these lists,
/// counted
/// from 0.
/// </summary>
internal sealed class BudgetInputs
{
    private readonly List<BudgetTerm> inputs = [];
    private readonly Dictionary<(string, EvaluationType, InputDistribution, double), int> places = [];

    public static BudgetInputs Of(IReadOnlyList<StateResult> states)
    {
        var made = new BudgetInputs();
        foreach (BudgetTerm term in states.SelectMany(state => state.Estimate?.Budget ?? []))
        {
            made.Add(term);
        }

        return made;
    }

    public static BudgetInputs Read(JsonElement columns)
    {
        var read = new BudgetInputs();
        foreach (BudgetTerm input in new ColumnTable(columns, "name").Rows(row => new BudgetTerm(
            row.Text("name"),
            row.Word<EvaluationType>("type"),
            row.Word<InputDistribution>("distribution"),
            0,
            0,
            row.OptionalNumber("dof") ?? double.PositiveInfinity)))
        {
            read.Add(input);
        }

        return read;
    }

    public int PlaceOf(BudgetTerm term) => places[Key(term)];

    public BudgetTerm Term(int place, double volt, double ohm) => place >= 0 && place < inputs.Count
        ? inputs[place] with { SourceVoltageVolt = volt, InternalResistanceOhm = ohm }
        : throw new FormatException($"A budget names input {place}, which is not listed.");

    public void Write(CanonicalWriter writer)
    {
        writer.StartObject();
        writer.List("distribution", inputs, (w, input) => w.String(Words<InputDistribution>.Of(input.Distribution)));

        // Known exactly is infinitely many degrees of freedom, and that is no JSON number.
        writer.List("dof", inputs, (w, input) => w.NumberOrNull(
            double.IsPositiveInfinity(input.DegreesOfFreedom) ? null : input.DegreesOfFreedom));
        writer.List("name", inputs, (w, input) => w.String(input.Name));
        writer.List("type", inputs, (w, input) => w.String(Words<EvaluationType>.Of(input.Type)));
        writer.EndObject();
    }

    private static (string, EvaluationType, InputDistribution, double) Key(BudgetTerm term) =>
        (term.Name, term.Type, term.Distribution, term.DegreesOfFreedom);

    private void Add(BudgetTerm term)
    {
        if (places.TryAdd(Key(term), inputs.Count))
        {
            inputs.Add(term);
        }
    }
}
