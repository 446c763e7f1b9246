using System.Text.Json;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>Bodies of the records that are about the station and its lots.</summary>
internal static class StationBodies
{
    public static void Write(CanonicalWriter writer, StoreRecord store)
    {
        writer.Utc("created_utc", store.CreatedAt);
        BodyCodec.Identify(writer, store);
        writer.Text("program", store.ProgramVersion);
        writer.Text("public_key", store.PublicKey);
        writer.Text("station", store.Station);
    }

    public static StoreRecord ReadStore(JsonElement body) => new(
        body.Text("station"), body.Utc("created_utc"), body.Text("program"), body.Text("public_key"));

    public static void Write(CanonicalWriter writer, LotCloseRecord close)
    {
        writer.Integer("aborted", close.Aborted);
        writer.Integer("boards", close.Boards);
        writer.Utc("closed_utc", close.ClosedAt);
        writer.Integer("failed", close.Failed);
        BodyCodec.Identify(writer, close);
        writer.Text("lot", close.Lot);
        writer.Text("operator", close.Operator);
        writer.Integer("passed", close.Passed);
        writer.Text("product", close.Product);
        writer.Text("program", close.ProgramVersion);
        writer.Integer("retest", close.Retest);
        writer.Utc("started_utc", close.StartedAt);
    }

    public static LotCloseRecord ReadLotClose(JsonElement body) => new(
        body.Text("lot"),
        body.Text("product"),
        body.OptionalText("operator"),
        body.Utc("started_utc"),
        body.Utc("closed_utc"),
        body.Integer("boards"),
        body.Integer("passed"),
        body.Integer("failed"),
        body.Integer("retest"),
        body.Integer("aborted"),
        body.Text("program"));

    public static void Write(CanonicalWriter writer, HoldRecord hold)
    {
        writer.Utc("at_utc", hold.At);
        BodyCodec.Identify(writer, hold);
        writer.Text("lot", hold.Lot);
        writer.Text("program", hold.ProgramVersion);
        writer.Text("reason", hold.Reason);
    }

    public static HoldRecord ReadHold(JsonElement body) => new(
        body.OptionalText("lot"), body.Utc("at_utc"), body.Text("reason"), body.Text("program"));
}
