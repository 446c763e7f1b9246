using System.Buffers.Binary;
using System.IO.Compression;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>
/// Packs bodies with raw DEFLATE (RFC 1951) behind a preset dictionary, as <c>deflateSetDictionary</c> of zlib does:
/// the
/// dictionary is packed first and what it gave is left out. DEFLATE carries nothing from block to block but the window,
/// so any stream that yields the dictionary may stand in its place when unpacking. The body's length stands before it
/// (4 bytes, most significant first): a stream that was cut ends without a sign.
/// </summary>
internal static class BodyCompression
{
    /// <summary>Largest body that is unpacked; a damaged store must not take all memory.</summary>
    public const int LongestBody = 16 * 1024 * 1024;

    private const int LengthBytes = sizeof(int);

    // Measured on bodies of 8 outputs: see DEVELOPERS.md.
    private static readonly ZLibCompressionOptions Options = new() { CompressionLevel = 6 };

    private static readonly byte[] StoredDictionary = StoreDictionary();

    public static byte[] Pack(ReadOnlySpan<byte> body)
    {
        using var packed = new MemoryStream(16 * 1024);
        int start;
        using (var deflate = new DeflateStream(packed, Options, leaveOpen: true))
        {
            deflate.Write(PackingDictionary.Bytes);
            deflate.Flush();
            start = (int)packed.Length;
            deflate.Write(body);
        }

        // What the dictionary gave is longer than the length that takes its place.
        Span<byte> kept = packed.GetBuffer().AsSpan(start - LengthBytes, (int)packed.Length - start + LengthBytes);
        BinaryPrimitives.WriteInt32BigEndian(kept, body.Length);
        return kept.ToArray();
    }

    /// <exception cref="InvalidDataException">The bytes are no packed body.</exception>
    public static byte[] Unpack(ReadOnlySpan<byte> packed)
    {
        if (packed.Length < LengthBytes
            || BinaryPrimitives.ReadInt32BigEndian(packed) is var length && length is < 0 or > LongestBody)
        {
            throw new InvalidDataException("The stored bytes do not begin with the length of a body.");
        }

        ReadOnlySpan<byte> stream = packed[LengthBytes..];
        var whole = new byte[StoredDictionary.Length + stream.Length];
        StoredDictionary.CopyTo(whole, 0);
        stream.CopyTo(whole.AsSpan(StoredDictionary.Length));
        using var inflate = new DeflateStream(new MemoryStream(whole), CompressionMode.Decompress);
        var unpacked = new byte[PackingDictionary.Bytes.Length + length];
        try
        {
            inflate.ReadExactly(unpacked);
        }
        catch (EndOfStreamException exception)
        {
            throw new InvalidDataException("The stored bytes end before the body does.", exception);
        }

        return inflate.ReadByte() < 0
            ? unpacked[PackingDictionary.Bytes.Length..]
            : throw new InvalidDataException("The stored bytes unpack to more than the body.");
    }

    // One stored block, not the last: 3 bits of type in a byte, the length, its complement, the bytes.
    private static byte[] StoreDictionary()
    {
        ReadOnlySpan<byte> dictionary = PackingDictionary.Bytes;
        var block = new byte[5 + dictionary.Length];
        BinaryPrimitives.WriteUInt16LittleEndian(block.AsSpan(1), (ushort)dictionary.Length);
        BinaryPrimitives.WriteUInt16LittleEndian(block.AsSpan(3), (ushort)~dictionary.Length);
        dictionary.CopyTo(block.AsSpan(5));
        return block;
    }
}
