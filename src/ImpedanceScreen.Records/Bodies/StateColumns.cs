using System.Text.Json;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>
/// The outputs in their drive states within a board's body, one list a column: entry i of each list belongs to the same
/// output and state. Names stand once, and like numbers stand together, which halves the packed size against a list of
/// objects. A reading's time counts from the reading before it, the first one's from the start of the attempt. Columns
/// <c>limit_</c>, <c>point_</c> and <c>budget_</c> hold a list an entry, <c>reading_</c> a list a load point.
/// </summary>
internal static class StateColumns
{
    public static void Write(CanonicalWriter writer, IReadOnlyList<StateResult> states, BudgetInputs inputs)
    {
        writer.StartObject();
        writer.List("budget_input", states, (w, s) => Terms(w, s, (_, term) => w.Integer(inputs.PlaceOf(term))));
        writer.List("budget_rth_ohm", states, (w, s) => Terms(w, s, (_, t) => w.NumberOrNull(t.InternalResistanceOhm)));
        writer.List("budget_vth_v", states, (w, s) => Terms(w, s, (_, t) => w.NumberOrNull(t.SourceVoltageVolt)));
        writer.List("chi_squared", states, (w, s) => w.NumberOrNull(s.Estimate?.ChiSquared));
        writer.List("correlation", states, (w, s) => w.NumberOrNull(s.Estimate?.Correlation));
        writer.List("decision", states, (w, s) => w.String(Words<Decision>.Of(s.Decision)));
        writer.List("dof", states, (w, s) => w.NumberOrNull(s.Estimate?.DegreesOfFreedom));
        writer.List("fault", states, (w, s) => WriteFault(w, s.Fault));
        writer.List("k_rth", states, (w, s) => w.NumberOrNull(s.Estimate?.InternalResistanceCoverage));
        writer.List("k_vth", states, (w, s) => w.NumberOrNull(s.Estimate?.SourceVoltageCoverage));
        WriteLimits(writer, states);
        writer.List("output", states, (w, s) => w.String(s.Output));
        writer.List("p_value", states, (w, s) => w.NumberOrNull(s.Estimate?.PValue));
        WritePoints(writer, states);
        writer.List("rth_ohm", states, (w, s) => w.NumberOrNull(s.Estimate?.InternalResistanceOhm));
        writer.List("state", states, (w, s) => w.String(s.State));
        writer.List("u_rth_ohm", states, (w, s) => w.NumberOrNull(s.Estimate?.InternalResistanceUncertaintyOhm));
        writer.List("u_vth_v", states, (w, s) => w.NumberOrNull(s.Estimate?.SourceVoltageUncertaintyVolt));
        writer.List("vth_v", states, (w, s) => w.NumberOrNull(s.Estimate?.SourceVoltageVolt));
        writer.EndObject();
    }

    public static IReadOnlyList<StateResult> Read(JsonElement columns, BudgetInputs inputs)
    {
        var table = new ColumnTable(columns, "output");
        int before = 0;
        return table.Rows(row => new StateResult(
            row.Text("output"),
            row.Text("state"),
            row.Number("range_v"),
            ReadPoints(row, after => before += after),
            ReadEstimate(row, inputs),
            row.Cell("fault") is { ValueKind: not JsonValueKind.Null } fault ? ReadFault(fault) : null,
            ReadLimits(row),
            row.Word<Decision>("decision")));
    }

    private static void Terms(CanonicalWriter writer, StateResult state, Action<CanonicalWriter, BudgetTerm> write)
    {
        if (state.Estimate is { } estimate)
        {
            writer.Items(estimate.Budget, write);
        }
        else
        {
            writer.Null();
        }
    }

    private static Estimate? ReadEstimate(ColumnRow row, BudgetInputs inputs) => row.IsNull("budget_input")
        ? null
        : new Estimate(
            row.Number("vth_v"),
            row.Number("rth_ohm"),
            row.Number("u_vth_v"),
            row.Number("u_rth_ohm"),
            row.Number("correlation"),
            row.Number("k_vth"),
            row.Number("k_rth"),
            row.Number("chi_squared"),
            row.Integer("dof"),
            row.Number("p_value"),
            row.Within("budget_input", "budget_vth_v", "budget_rth_ohm").Rows(term => inputs.Term(
                term.Integer("budget_input"), term.Number("budget_vth_v"), term.Number("budget_rth_ohm"))));

    private static void WriteLimits(CanonicalWriter writer, IReadOnlyList<StateResult> states)
    {
        Column("limit_conformity", (w, limit) => w.NumberOrNull(limit.ConformityProbability));
        Column("limit_decision", (w, limit) => w.String(Words<Decision>.Of(limit.Decision)));
        Column("limit_guard_band", (w, limit) => w.NumberOrNull(limit.GuardBand));
        Column("limit_guard_factor", (w, limit) => w.NumberOrNull(limit.GuardFactor));
        Column("limit_max", (w, limit) => w.NumberOrNull(limit.Max));
        Column("limit_min", (w, limit) => w.NumberOrNull(limit.Min));
        Column("limit_quantity", (w, limit) => w.String(Words<Quantity>.Of(limit.Quantity)));
        Column("limit_rated_load_ohm", (w, limit) => w.NumberOrNull(limit.RatedLoadOhm));
        Column("limit_u95", (w, limit) => w.NumberOrNull(limit.ExpandedUncertainty));
        Column("limit_value", (w, limit) => w.NumberOrNull(limit.Value));

        void Column(string name, Action<CanonicalWriter, LimitDecision> write) =>
            writer.List(name, states, (w, state) => w.Items(state.Decisions, write));
    }

    private static IReadOnlyList<LimitDecision> ReadLimits(ColumnRow row) => row.Within(
        "limit_quantity", "limit_rated_load_ohm", "limit_value", "limit_u95", "limit_min", "limit_max",
        "limit_guard_factor", "limit_guard_band", "limit_conformity", "limit_decision").Rows(limit => new LimitDecision(
            limit.Word<Quantity>("limit_quantity"),
            limit.OptionalNumber("limit_rated_load_ohm"),
            limit.Number("limit_value"),
            limit.Number("limit_u95"),
            limit.OptionalNumber("limit_min"),
            limit.OptionalNumber("limit_max"),
            limit.Number("limit_guard_factor"),
            limit.Number("limit_guard_band"),
            limit.Number("limit_conformity"),
            limit.Word<Decision>("limit_decision")));

    private static void WritePoints(CanonicalWriter writer, IReadOnlyList<StateResult> states)
    {
        Column("point_contact", (w, point) => w.TruthOrNull(point.ContactProved));
        Column("point_load", (w, point) => w.String(point.Load));
        Column("point_reads_return", (w, point) => w.TruthOrNull(point.ReadsLoadReturn));
        writer.List("range_v", states, (w, state) => w.NumberOrNull(state.RangeVolt));
        int before = 0;
        Column("reading_after_ms", (w, point) => w.Items(point.Readings, (_, reading) =>
        {
            w.Integer(reading.AtMilliseconds - (long)before);
            before = reading.AtMilliseconds;
        }));
        Column("reading_raw", (w, point) => w.Items(point.Readings, (_, reading) => w.String(reading.Raw)));

        void Column(string name, Action<CanonicalWriter, PointRecord> write) =>
            writer.List(name, states, (w, state) => w.Items(state.Points, write));
    }

    private static IReadOnlyList<PointRecord> ReadPoints(ColumnRow row, Func<int, int> atMs) => row.Within(
        "point_load", "point_reads_return", "point_contact", "reading_after_ms", "reading_raw").Rows(point => new PointRecord(
            point.OptionalText("point_load"),
            point.Truth("point_reads_return"),
            point.OptionalTruth("point_contact"),
            point.Within("reading_after_ms", "reading_raw").Rows(reading => new ReadingRecord(
                atMs(reading.Integer("reading_after_ms")), reading.Text("reading_raw")))));

    private static void WriteFault(CanonicalWriter writer, SourceFault? fault)
    {
        if (fault is null)
        {
            writer.Null();
            return;
        }

        writer.StartObject();
        writer.Text("kind", Words<SourceFaultKind>.Of(fault.Kind));
        writer.Truth("of_fixture", fault.OfFixture);
        writer.Text("words", fault.Words);
        writer.EndObject();
    }

    private static SourceFault ReadFault(JsonElement fault) => new(
        fault.Word<SourceFaultKind>("kind"), fault.Text("words"), fault.Truth("of_fixture"));
}
