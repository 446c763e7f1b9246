using System.Text.Json;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>
/// Records to canonical bodies and back. Every body names its <c>kind</c> and <c>format</c>; a released format is
/// never changed, a new
/// one gets the next number and this class goes on reading the old.
/// </summary>
public static class BodyCodec
{
    /// <summary>The format that is written.</summary>
    public const int Format = 1;

    /// <summary>The canonical body of a record, UTF-8.</summary>
    /// <exception cref="ArgumentException">It holds an infinite number, a lone surrogate, or is of an unknown
    /// kind.</exception>
    public static byte[] Encode(Record record)
    {
        var writer = new CanonicalWriter();
        writer.StartObject();
        switch (record)
        {
            case BoardRecord board:
                BoardBody.Write(writer, board);
                break;
            case StoreRecord store:
                StationBodies.Write(writer, store);
                break;
            case LotCloseRecord close:
                StationBodies.Write(writer, close);
                break;
            case HoldRecord hold:
                StationBodies.Write(writer, hold);
                break;
            default:
                throw new ArgumentException($"No body is defined for a record of kind '{record?.Kind}'.", nameof(record));
        }

        writer.EndObject();
        return writer.Written.ToArray();
    }

    /// <summary>The record of a body.</summary>
    /// <exception cref="FormatException">The body is none that this version knows.</exception>
    public static Record Decode(ReadOnlyMemory<byte> body)
    {
        try
        {
            using JsonDocument document = JsonDocument.Parse(body);
            JsonElement root = document.RootElement;
            if (root.Integer("format") != Format)
            {
                throw new FormatException("The body's format is newer than this program knows.");
            }

            return root.Text("kind") switch
            {
                "board" => BoardBody.Read(root),
                "store" => StationBodies.ReadStore(root),
                "lot-close" => StationBodies.ReadLotClose(root),
                "hold" => StationBodies.ReadHold(root),
                string kind => throw new FormatException($"The body's kind '{kind}' is unknown."),
            };
        }
        catch (Exception exception) when (exception is JsonException or InvalidOperationException)
        {
            throw new FormatException($"The body cannot be read: {exception.Message}", exception);
        }
    }

    /// <summary>
    /// Writes the two members that every body has; their names stand next to each other in every kind.
    /// </summary>
    internal static void Identify(CanonicalWriter writer, Record record)
    {
        writer.Integer("format", Format);
        writer.Text("kind", record.Kind);
    }
}
