using System.Text.Json;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>Body of a board's record.</summary>
internal static class BoardBody
{
    public static void Write(CanonicalWriter writer, BoardRecord board)
    {
        BudgetInputs inputs = BudgetInputs.Of(board.States);
        writer.Integer("attempt", board.Attempt);
        writer.Text("attempt_id", board.AttemptId.ToString("D"));
        writer.Name("budget_inputs");
        inputs.Write(writer);
        writer.Text("cause", board.Cause);
        writer.Text("disposition", Words<Disposition>.Of(board.Disposition));
        writer.Utc("ended_utc", board.EndedAt);
        writer.Text("fixture", board.Fixture);
        writer.Text("fixture_sha256", board.FixtureFileSha256);
        BodyCodec.Identify(writer, board);
        writer.Text("limits_sha256", board.LimitFileSha256);
        writer.Text("lot", board.Lot);
        writer.List("meters", board.Meters, WriteMeter);
        writer.Text("operator", board.Operator);
        writer.Text("previous_attempt_id", board.PreviousAttemptId?.ToString("D"));
        writer.Text("product", board.Product);
        writer.Text("program", board.ProgramVersion);
        writer.Text("revision", board.Revision);
        writer.Text("serial", board.Serial);
        writer.Utc("started_utc", board.StartedAt);
        writer.Name("states");
        StateColumns.Write(writer, board.States, inputs);
        writer.Text("station", board.Station);
        writer.Number("temperature_degc", board.TemperatureDegC);
        writer.Name("time_ms");
        WriteTime(writer, board.TimeSpent);
    }

    public static BoardRecord Read(JsonElement body) => new(
        Identifier(body.Text("attempt_id")),
        body.Text("station"),
        body.Text("serial"),
        body.Integer("attempt"),
        body.OptionalText("previous_attempt_id") is { } previous ? Identifier(previous) : null,
        body.Text("product"),
        body.Text("revision"),
        body.OptionalText("lot"),
        body.OptionalText("operator"),
        body.Text("fixture"),
        body.Utc("started_utc"),
        body.Utc("ended_utc"),
        body.Text("program"),
        body.Text("limits_sha256"),
        body.Text("fixture_sha256"),
        body.List("meters", meter => new MeterUsed(meter.Text("name"), meter.Text("idn"))),
        body.OptionalNumber("temperature_degc"),
        StateColumns.Read(body.Inner("states"), BudgetInputs.Read(body.Inner("budget_inputs"))),
        body.Word<Disposition>("disposition"),
        body.Text("cause"),
        ReadTime(body.Inner("time_ms")));

    private static Guid Identifier(string text) => Guid.ParseExact(text, "D");

    private static void WriteMeter(CanonicalWriter writer, MeterUsed meter)
    {
        writer.StartObject();
        writer.Text("idn", meter.Identity);
        writer.Text("name", meter.Name);
        writer.EndObject();
    }

    private static void WriteTime(CanonicalWriter writer, TimeSpent time)
    {
        writer.StartObject();
        writer.Integer("integrating", time.IntegratingMs);
        writer.Integer("other", time.OtherMs);
        writer.Integer("settling", time.SettlingMs);
        writer.Integer("switching", time.SwitchingMs);
        writer.Integer("talking", time.TalkingMs);
        writer.EndObject();
    }

    private static TimeSpent ReadTime(JsonElement time) => new(
        time.Integer("switching"),
        time.Integer("settling"),
        time.Integer("integrating"),
        time.Integer("talking"),
        time.Integer("other"));
}
