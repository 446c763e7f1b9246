using System.Security.Cryptography;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>A record ready to be inserted: everything that does not depend on its place in the chain.</summary>
/// <param name="Record">The record.</param>
/// <param name="BodyHash">SHA-256 of the canonical body.</param>
/// <param name="Packed">The packed canonical body.</param>
/// <param name="Crc">CRC-32 of the packed bytes.</param>
/// <param name="Results">The narrow rows of a board's record, in the order of the body.</param>
internal sealed record SealedRecord(
    Record Record, byte[] BodyHash, byte[] Packed, uint Crc, IReadOnlyList<ResultRow> Results)
{
    /// <summary>The board's record; null for other kinds.</summary>
    public BoardRecord? Board => Record as BoardRecord;

    /// <summary>Makes body, hash, packed bytes and rows.</summary>
    /// <exception cref="ArgumentException">The record holds an infinite number or a lone surrogate.</exception>
    public static SealedRecord Seal(Record record)
    {
        byte[] body = BodyCodec.Encode(record);
        byte[] packed = BodyCompression.Pack(body);
        return new SealedRecord(record, SHA256.HashData(body), packed, Crc32.Of(packed), ResultRow.AllOf(record));
    }
}
