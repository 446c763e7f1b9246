using System.Text.Json;

namespace ImpedanceScreen.Records.Canonical;

/// <summary>Brings any JSON text into the canonical form of RFC 8785.</summary>
public static class CanonicalJson
{
    private static readonly JsonDocumentOptions Options = new()
    {
        AllowTrailingCommas = false, CommentHandling = JsonCommentHandling.Disallow, MaxDepth = 64,
    };

    /// <summary>The canonical form of a JSON text.</summary>
    /// <param name="json">UTF-8.</param>
    /// <exception cref="FormatException">
    /// It is no JSON, names a member twice, holds a surrogate alone or a number beyond the range of a double.
    /// </exception>
    public static byte[] Canonicalize(ReadOnlyMemory<byte> json)
    {
        try
        {
            using JsonDocument document = JsonDocument.Parse(json, Options);
            var writer = new CanonicalWriter();
            Write(writer, document.RootElement);
            return writer.Written.ToArray();
        }
        catch (Exception exception) when (exception is JsonException or ArgumentException or InvalidOperationException)
        {
            // The reader reports a lone surrogate as an invalid operation, the writer a repeated name as an argument.
            throw new FormatException($"Not a JSON text that has a canonical form: {exception.Message}", exception);
        }
    }

    private static void Write(CanonicalWriter writer, JsonElement element)
    {
        switch (element.ValueKind)
        {
            case JsonValueKind.Object:
                writer.StartObject();
                foreach (JsonProperty member in element.EnumerateObject().OrderBy(m => m.Name, StringComparer.Ordinal))
                {
                    writer.Name(member.Name);
                    Write(writer, member.Value);
                }

                writer.EndObject();
                break;
            case JsonValueKind.Array:
                writer.StartArray();
                foreach (JsonElement item in element.EnumerateArray())
                {
                    Write(writer, item);
                }

                writer.EndArray();
                break;
            case JsonValueKind.String:
                writer.String(element.GetString());
                break;
            case JsonValueKind.Number:
                writer.Number(element.GetDouble());
                break;
            case JsonValueKind.True or JsonValueKind.False:
                writer.Boolean(element.GetBoolean());
                break;
            default:
                writer.Null();
                break;
        }
    }
}
