using System.Buffers.Binary;
using System.Security.Cryptography;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>The links of the chain.</summary>
public static class ChainLink
{
    /// <summary>Length of a hash and of a link, bytes.</summary>
    public const int Length = SHA256.HashSizeInBytes;

    /// <summary>What stands before record 0: 32 zero bytes.</summary>
    public static byte[] Origin => new byte[Length];

    /// <summary>
    /// SHA-256 (FIPS 180-4) of 72 bytes: the previous link (32), the sequence number (8, most significant first), the
    /// body's
    /// hash (32).
    /// </summary>
    public static byte[] Next(ReadOnlySpan<byte> previousLink, long sequence, ReadOnlySpan<byte> bodyHash)
    {
        Span<byte> chained = stackalloc byte[Length + sizeof(long) + Length];
        previousLink.CopyTo(chained);
        BinaryPrimitives.WriteInt64BigEndian(chained[Length..], sequence);
        bodyHash.CopyTo(chained[(Length + sizeof(long))..]);
        return SHA256.HashData(chained);
    }
}
