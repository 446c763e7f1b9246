using System.Security.Cryptography;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Records.Canonical;
using ImpedanceScreen.Records.Sealing;

namespace ImpedanceScreen.Records.Auditing;

/// <summary>
/// Follows the chain record by record. After a finding it goes on from what is stored, so that one tampering is named
/// once.
/// </summary>
internal sealed class ChainAudit(Findings findings, RowAudit rows, ChainHead? known)
{
    private byte[] link = ChainLink.Origin;
    private long next;
    private bool knownSeen;

    public long Records { get; private set; }

    public ChainHead? Head => Records == 0 ? null : new ChainHead(next - 1, Convert.ToHexStringLower(link));

    public void Follow(StoredRecord row)
    {
        Records++;
        if (row.Sequence != next)
        {
            findings.Add(row.Sequence == next + 1
                ? $"record {next} is missing"
                : $"records {next} to {row.Sequence - 1} are missing");
        }

        CheckBody(row);
        bool gap = row.Sequence != next;
        if (!gap)
        {
            findings.Require(
                ChainLink.Next(link, row.Sequence, row.BodyHash).AsSpan().SequenceEqual(row.Link),
                $"{row.Name}: its link does not follow from the record before it");
        }

        link = row.Link;
        next = row.Sequence + 1;
        if (known?.Sequence == row.Sequence)
        {
            knownSeen = true;
            findings.Require(
                Convert.ToHexStringLower(row.Link) == known.Link, $"{row.Name}: its link is not that of the given head");
        }
    }

    /// <summary>After the last record.</summary>
    public void End()
    {
        findings.Require(Records > 0, "record 0 is missing");
        if (known is not null && !knownSeen)
        {
            findings.Add(next > known.Sequence
                ? $"record {known.Sequence}, the given head, is missing"
                : $"records {next} to {known.Sequence} are missing: the tail was cut before the given head");
        }
    }

    private void CheckBody(StoredRecord row)
    {
        if (row.Crc != Crc32.Of(row.Body))
        {
            findings.Add($"{row.Name}: stored bytes do not match their CRC-32");
        }

        byte[] body;
        try
        {
            body = BodyCompression.Unpack(row.Body);
        }
        catch (InvalidDataException)
        {
            findings.Add($"{row.Name}: body cannot be unpacked");
            return;
        }

        findings.Require(
            SHA256.HashData(body).AsSpan().SequenceEqual(row.BodyHash), $"{row.Name}: body does not match its hash");
        try
        {
            findings.Require(
                CanonicalJson.Canonicalize(body).AsSpan().SequenceEqual(body), $"{row.Name}: body is not canonical");
            rows.Check(row, BodyCodec.Decode(body));
        }
        catch (FormatException exception)
        {
            findings.Add($"{row.Name}: body cannot be read: {exception.Message}");
        }
    }
}
