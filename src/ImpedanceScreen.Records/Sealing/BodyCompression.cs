using System.IO.Compression;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>
/// Packs bodies with Brotli (RFC 7932), whose built-in dictionary suits texts as short as a body.
/// </summary>
internal static class BodyCompression
{
    /// <summary>Largest body that is unpacked; a damaged store must not take all memory.</summary>
    public const int LongestBody = 16 * 1024 * 1024;

    // Measured on bodies of 8 outputs: see DEVELOPERS.md. The window covers any usual body whole.
    private const int Quality = 5;
    private const int WindowBits = 16;

    public static byte[] Pack(ReadOnlySpan<byte> body)
    {
        var packed = new byte[BrotliEncoder.GetMaxCompressedLength(body.Length)];
        return BrotliEncoder.TryCompress(body, packed, out int length, Quality, WindowBits)
            ? packed[..length]
            : throw new InvalidOperationException("A body could not be packed.");
    }

    /// <exception cref="InvalidDataException">The bytes are no packed body.</exception>
    public static byte[] Unpack(ReadOnlySpan<byte> packed)
    {
        for (int size = 32 * 1024; size <= LongestBody; size *= 2)
        {
            var body = new byte[size];
            using var decoder = new BrotliDecoder();
            System.Buffers.OperationStatus status = decoder.Decompress(packed, body, out int used, out int length);
            if (status == System.Buffers.OperationStatus.Done && used == packed.Length)
            {
                return body[..length];
            }

            if (status != System.Buffers.OperationStatus.DestinationTooSmall)
            {
                break;
            }
        }

        throw new InvalidDataException("The stored bytes cannot be unpacked.");
    }
}
