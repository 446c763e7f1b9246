using System.Buffers.Binary;
using System.IO.Compression;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>
/// Packs bodies with raw DEFLATE (RFC 1951) behind a preset dictionary, as <c>deflateSetDictionary</c> of zlib does: the
/// dictionary is packed first and what it gave is left out. DEFLATE carries nothing from block to block but the window,
/// so any stream that yields the dictionary may stand in its place when unpacking.
/// </summary>
internal static class BodyCompression
{
    /// <summary>Largest body that is unpacked; a damaged store must not take all memory.</summary>
    public const int LongestBody = 16 * 1024 * 1024;

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

        return packed.GetBuffer().AsSpan(start, (int)packed.Length - start).ToArray();
    }

    /// <exception cref="InvalidDataException">The bytes are no packed body.</exception>
    public static byte[] Unpack(ReadOnlySpan<byte> packed)
    {
        var whole = new byte[StoredDictionary.Length + packed.Length];
        StoredDictionary.CopyTo(whole, 0);
        packed.CopyTo(whole.AsSpan(StoredDictionary.Length));
        using var inflate = new DeflateStream(new MemoryStream(whole), CompressionMode.Decompress);
        using var body = new MemoryStream(32 * 1024);
        Span<byte> chunk = stackalloc byte[4096];
        int skip = PackingDictionary.Bytes.Length;
        for (int read = inflate.Read(chunk); read > 0; read = inflate.Read(chunk))
        {
            int left = Math.Min(skip, read);
            skip -= left;
            body.Write(chunk[left..read]);
            if (body.Length > LongestBody)
            {
                throw new InvalidDataException("The stored bytes unpack to more than any body.");
            }
        }

        return body.ToArray();
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
