using System.Text.Json;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>One output in one drive state within a board's body.</summary>
internal static class StateBody
{
    public static void Write(CanonicalWriter writer, StateResult state)
    {
        writer.StartObject();
        writer.Text("decision", Words<Decision>.Of(state.Decision));
        writer.List("decisions", state.Decisions, WriteDecision);
        writer.Name("estimate");
        EstimateBody.Write(writer, state.Estimate);
        writer.Name("fault");
        WriteFault(writer, state.Fault);
        writer.Text("output", state.Output);
        writer.List("points", state.Points, WritePoint);
        writer.Number("range_v", state.RangeVolt);
        writer.Text("state", state.State);
        writer.EndObject();
    }

    public static StateResult Read(JsonElement state) => new(
        state.Text("output"),
        state.Text("state"),
        state.Number("range_v"),
        state.List("points", ReadPoint),
        state.Object("estimate") is { } estimate ? EstimateBody.Read(estimate) : null,
        state.Object("fault") is { } fault ? ReadFault(fault) : null,
        state.List("decisions", ReadDecision),
        state.Word<Decision>("decision"));

    private static void WriteDecision(CanonicalWriter writer, LimitDecision decision)
    {
        writer.StartObject();
        writer.Number("conformity", decision.ConformityProbability);
        writer.Text("decision", Words<Decision>.Of(decision.Decision));
        writer.Number("guard_band", decision.GuardBand);
        writer.Number("guard_factor", decision.GuardFactor);
        writer.Number("max", decision.Max);
        writer.Number("min", decision.Min);
        writer.Text("quantity", Words<Quantity>.Of(decision.Quantity));
        writer.Number("rated_load_ohm", decision.RatedLoadOhm);
        writer.Number("u95", decision.ExpandedUncertainty);
        writer.Number("value", decision.Value);
        writer.EndObject();
    }

    private static LimitDecision ReadDecision(JsonElement decision) => new(
        decision.Word<Quantity>("quantity"),
        decision.OptionalNumber("rated_load_ohm"),
        decision.Number("value"),
        decision.Number("u95"),
        decision.OptionalNumber("min"),
        decision.OptionalNumber("max"),
        decision.Number("guard_factor"),
        decision.Number("guard_band"),
        decision.Number("conformity"),
        decision.Word<Decision>("decision"));

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

    // Readings stand as two lists side by side: a third shorter than a list of pairs of members, and packs better.
    private static void WritePoint(CanonicalWriter writer, PointRecord point)
    {
        writer.StartObject();
        writer.List("at_ms", point.Readings, (w, reading) => w.Integer(reading.AtMilliseconds));
        writer.Truth("contact", point.ContactProved);
        writer.Text("load", point.Load);
        writer.List("raw", point.Readings, (w, reading) => w.String(reading.Raw));
        writer.Truth("reads_return", point.ReadsLoadReturn);
        writer.EndObject();
    }

    private static PointRecord ReadPoint(JsonElement point)
    {
        List<int> at = point.List("at_ms", time => time.GetInt32());
        List<string> raw = point.List("raw", text => text.GetString() ?? throw new FormatException("'raw' is null."));
        return at.Count == raw.Count
            ? new PointRecord(
                point.OptionalText("load"),
                point.Truth("reads_return"),
                point.OptionalTruth("contact"),
                at.Zip(raw, (time, text) => new ReadingRecord(time, text)).ToList())
            : throw new FormatException("'at_ms' and 'raw' are of different length.");
    }
}
