using System.Text;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Records.Sealing;
using ImpedanceScreen.Tests.Records.Shared;

namespace ImpedanceScreen.Tests.Records;

public sealed class PackingTests
{
    /// <summary>The check value of CRC-32 as of ISO/IEC 3309 and ITU-T V.42 (common practice).</summary>
    [Fact]
    public void The_crc_of_the_nine_digits_is_the_published_check_value() =>
        Assert.Equal(0xCBF43926u, Crc32.Of("123456789"u8));

    [Fact]
    public void What_is_packed_comes_back_the_same_whatever_its_length()
    {
        byte[] board = BodyCodec.Encode(new RandomRecords(8).Board());
        var noise = new byte[200_000];
        new Random(8).NextBytes(noise);
        foreach (byte[] body in new[] { [], "{}"u8.ToArray(), board, noise })
        {
            Assert.Equal(body, BodyCompression.Unpack(BodyCompression.Pack(body)));
        }
    }

    [Fact]
    public void Cut_or_foreign_bytes_never_give_a_body()
    {
        byte[] body = BodyCodec.Encode(new RandomRecords(9).Board());
        byte[] packed = BodyCompression.Pack(body);

        // The last bytes only say that the stream ends: without them the body is still whole, and the CRC-32 tells.
        for (int length = 0; length < packed.Length - 8; length += 97)
        {
            byte[] cut = packed[..length];
            Assert.Throws<InvalidDataException>(() => BodyCompression.Unpack(cut));
        }

        Assert.Throws<InvalidDataException>(() => BodyCompression.Unpack(Encoding.ASCII.GetBytes("no packed body")));
    }

    /// <summary>The dictionary belongs to stored bytes: its CRC-32 as released.</summary>
    [Fact]
    public void The_dictionary_is_the_released_one() =>
        Assert.Equal(0xDC1E38E5u, Crc32.Of(PackingDictionary.Bytes));
}
