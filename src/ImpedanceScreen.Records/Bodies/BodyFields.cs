using System.Globalization;
using System.Text.Json;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>Members of a body, written and read alike: absent values and NaN are null.</summary>
internal static class BodyFields
{
    private const string UtcFormat = "yyyy-MM-dd'T'HH:mm:ss.fffffff'Z'";

    public static void Text(this CanonicalWriter writer, string name, string? value)
    {
        writer.Name(name);
        writer.String(value);
    }

    public static void Integer(this CanonicalWriter writer, string name, long value)
    {
        writer.Name(name);
        writer.Integer(value);
    }

    public static void Number(this CanonicalWriter writer, string name, double? value)
    {
        writer.Name(name);
        writer.NumberOrNull(value);
    }

    public static void Truth(this CanonicalWriter writer, string name, bool? value)
    {
        writer.Name(name);
        writer.TruthOrNull(value);
    }

    public static void Utc(this CanonicalWriter writer, string name, DateTimeOffset value) =>
        writer.Text(name, value.UtcDateTime.ToString(UtcFormat, CultureInfo.InvariantCulture));

    public static void List<T>(
        this CanonicalWriter writer, string name, IReadOnlyList<T> items, Action<CanonicalWriter, T> write)
    {
        writer.Name(name);
        writer.Items(items, write);
    }

    public static void Items<T>(this CanonicalWriter writer, IReadOnlyList<T> items, Action<CanonicalWriter, T> write)
    {
        writer.StartArray();
        foreach (T item in items)
        {
            write(writer, item);
        }

        writer.EndArray();
    }

    public static void NumberOrNull(this CanonicalWriter writer, double? value)
    {
        if (value is { } number && !double.IsNaN(number))
        {
            writer.Number(number);
        }
        else
        {
            writer.Null();
        }
    }

    public static void TruthOrNull(this CanonicalWriter writer, bool? value)
    {
        if (value is { } known)
        {
            writer.Boolean(known);
        }
        else
        {
            writer.Null();
        }
    }

    public static string Text(this JsonElement body, string name) =>
        body.OptionalText(name) ?? throw new FormatException($"'{name}' is null.");

    public static string? OptionalText(this JsonElement body, string name) => body.Member(name).GetString();

    public static int Integer(this JsonElement body, string name) => body.Member(name).GetInt32();

    public static double? OptionalNumber(this JsonElement body, string name) =>
        body.Member(name) is { ValueKind: not JsonValueKind.Null } number ? number.GetDouble() : null;

    public static double NumberOrNaN(this JsonElement value) =>
        value.ValueKind == JsonValueKind.Null ? double.NaN : value.GetDouble();

    public static bool Truth(this JsonElement body, string name) => body.Member(name).GetBoolean();

    public static DateTimeOffset Utc(this JsonElement body, string name) => DateTimeOffset.ParseExact(
        body.Text(name), UtcFormat, CultureInfo.InvariantCulture, DateTimeStyles.AssumeUniversal);

    public static T Word<T>(this JsonElement body, string name)
        where T : struct, Enum => Words<T>.Parse(body.Text(name));

    public static List<T> List<T>(this JsonElement body, string name, Func<JsonElement, T> read)
    {
        JsonElement items = body.Member(name);
        var list = new List<T>(items.GetArrayLength());
        foreach (JsonElement item in items.EnumerateArray())
        {
            list.Add(read(item));
        }

        return list;
    }

    public static JsonElement Inner(this JsonElement body, string name) =>
        body.Member(name) is { ValueKind: JsonValueKind.Object } inner
            ? inner
            : throw new FormatException($"'{name}' is no object.");

    private static JsonElement Member(this JsonElement body, string name) =>
        body.TryGetProperty(name, out JsonElement value) ? value : throw new FormatException($"'{name}' is missing.");
}
