using System.Globalization;
using System.Security.Cryptography;
using System.Text;
using System.Text.Json;
using CsCheck;
using ImpedanceScreen.Records.Canonical;

namespace ImpedanceScreen.Tests.Records;

public sealed class CanonicalJsonTests
{
    private static readonly string Data = Path.Combine(AppContext.BaseDirectory, "Records", "Data");

    /// <summary>RFC 8785 test data (see Data/README.md).</summary>
    [Theory]
    [InlineData("arrays")]
    [InlineData("french")]
    [InlineData("structures")]
    [InlineData("values")]
    public void Published_files_come_out_byte_for_byte(string name) => Assert.Equal(
        File.ReadAllBytes(Path.Combine(Data, "jcs", "output", name + ".json")),
        CanonicalJson.Canonicalize(File.ReadAllBytes(Path.Combine(Data, "jcs", "input", name + ".json"))));

    /// <summary>RFC 8785, Appendix B.</summary>
    [Fact]
    public void Published_numbers_come_out_as_printed()
    {
        JsonElement pairs = Case("rfc8785-numbers").GetProperty("published").GetProperty("bits to text");
        Assert.True(pairs.GetArrayLength() > 10);
        foreach (JsonElement pair in pairs.EnumerateArray())
        {
            long bits = long.Parse(pair[0].GetString()!, NumberStyles.HexNumber, CultureInfo.InvariantCulture);
            Assert.Equal(pair[1].GetString(), Text(BitConverter.Int64BitsToDouble(bits)));
        }
    }

    /// <summary>FIPS 180-4 example values.</summary>
    [Fact]
    public void The_hash_is_the_published_one()
    {
        foreach (JsonProperty pair in Case("sha256").GetProperty("published").EnumerateObject())
        {
            string message = pair.Name == "(empty)" ? string.Empty : pair.Name;
            Assert.Equal(pair.Value.GetString(), Convert.ToHexStringLower(SHA256.HashData(Encoding.ASCII.GetBytes(message))));
        }
    }

    [Fact]
    public void Every_finite_number_reads_back_to_the_same_bits() => Gen.Long.Sample(
        bits =>
        {
            double value = BitConverter.Int64BitsToDouble(bits);
            return !double.IsFinite(value) || value == 0
                || double.Parse(Text(value), CultureInfo.InvariantCulture).Equals(value);
        },
        iter: 20_000);

    [Fact]
    public void Any_text_reads_back_and_is_canonical_already() => Gen.String.Sample(
        text =>
        {
            if (HasLoneSurrogate(text))
            {
                Assert.Throws<EncoderFallbackException>(() => Quoted(text));
                return;
            }

            byte[] quoted = Quoted(text);
            Assert.Equal(text, JsonDocument.Parse(quoted).RootElement.GetString());
            Assert.Equal(quoted, CanonicalJson.Canonicalize(quoted));
        },
        iter: 3_000);

    [Theory]
    [InlineData(9007199254740992, "9007199254740992")]
    [InlineData(9007199254740993, "\"9007199254740993\"")]
    [InlineData(-9007199254740993, "\"-9007199254740993\"")]
    [InlineData(long.MinValue, "\"-9223372036854775808\"")]
    public void Integers_beyond_two_to_the_53_are_text(long value, string expected)
    {
        var writer = new CanonicalWriter();
        writer.Integer(value);
        Assert.Equal(expected, Encoding.UTF8.GetString(writer.Written));
    }

    [Theory]
    [InlineData(double.NaN)]
    [InlineData(double.PositiveInfinity)]
    [InlineData(double.NegativeInfinity)]
    public void What_is_no_number_is_refused(double value) => Assert.Throws<ArgumentException>(() => Text(value));

    [Theory]
    [InlineData("{\"a\":1,\"a\":2}")]
    [InlineData("\"\\ud800\"")]
    [InlineData("{\"\\udc00\":1}")]
    [InlineData("[1e999]")]
    [InlineData("[1,]")]
    [InlineData("")]
    public void What_has_no_canonical_form_is_refused(string json) =>
        Assert.Throws<FormatException>(() => CanonicalJson.Canonicalize(Encoding.UTF8.GetBytes(json)));

    private static JsonElement Case(string id) => JsonDocument
        .Parse(File.ReadAllText(Path.Combine(Data, "hashes-and-canonical-json.json"))).RootElement
        .GetProperty("cases").EnumerateArray().Single(entry => entry.GetProperty("id").GetString() == id);

    private static string Text(double value)
    {
        var writer = new CanonicalWriter();
        writer.Number(value);
        return Encoding.UTF8.GetString(writer.Written);
    }

    private static byte[] Quoted(string text)
    {
        var writer = new CanonicalWriter();
        writer.String(text);
        return writer.Written.ToArray();
    }

    private static bool HasLoneSurrogate(string text) =>
        text.EnumerateRunes().Any(rune => rune == Rune.ReplacementChar) && !text.Contains('\uFFFD', StringComparison.Ordinal);
}
