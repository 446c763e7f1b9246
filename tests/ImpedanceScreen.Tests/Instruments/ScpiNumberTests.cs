using System.Globalization;
using System.Text.Json;
using CsCheck;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Instruments.Scpi;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>
/// Numeric answers of IEEE 488.2-1992 8.7.2 to 8.7.4 and the special values of SCPI-1999 Volume 1, 7.2.1.
/// </summary>
public sealed class ScpiNumberTests
{
    public static TheoryData<string> Published => new(Responses().Select(response => response.Text("text")));

    [Theory]
    [MemberData(nameof(Published))]
    public void A_published_answer_is_read(string text)
    {
        JsonElement value = Responses().Single(response => response.Text("text") == text).GetProperty("value");
        ReadingCondition condition = value.ValueKind == JsonValueKind.Number ? ReadingCondition.Valid
            : value.GetString() == "not a number" ? ReadingCondition.NotANumber : ReadingCondition.Overload;

        ScpiNumber number = ScpiNumber.Parse(text);

        Assert.Equal(condition, number.Condition);
        Assert.Equal(condition == ReadingCondition.Valid ? value.GetDouble() : double.NaN, number.Value);
    }

    [Theory]
    [InlineData("  +1.25E+00\r\n", 1.25)]
    [InlineData("\t-3", -3)]
    [InlineData(".5", 0.5)]
    [InlineData("5.", 5)]
    [InlineData("1e-3", 0.001)]
    [InlineData("0.029", 0.029)]
    public void White_space_and_terminators_around_a_number_are_skipped(string text, double value) =>
        Assert.Equal(value, ScpiNumber.Parse(text).Value);

    [Theory]
    [InlineData("")]
    [InlineData("  \r\n")]
    [InlineData("+")]
    [InlineData(".")]
    [InlineData("1E")]
    [InlineData("1E+")]
    [InlineData("E5")]
    [InlineData("1,5")]
    [InlineData("1.2.3")]
    [InlineData("1 2")]
    [InlineData("NaN")]
    [InlineData("Infinity")]
    [InlineData("∞")]
    [InlineData("0x10")]
    [InlineData("1.0 V")]
    [InlineData("EXAMPLE,VOLTMETER,1234,1.0")]
    public void Anything_else_is_named_as_no_number(string text)
    {
        ScpiException error = Assert.Throws<ScpiException>(() => ScpiNumber.Parse(text));
        Assert.Equal(ScpiFault.NotNumeric, error.Fault);
    }

    [Fact]
    public void A_value_beyond_every_number_is_an_overload() =>
        Assert.Equal(ReadingCondition.Overload, ScpiNumber.Parse("-1E400").Condition);

    [Fact]
    public void Every_voltage_is_read_as_it_was_written() =>
        Gen.Double[-1000, 1000].Sample(value =>
        {
            string text = value.ToString("E16", CultureInfo.InvariantCulture);
            return ScpiNumber.Parse(text).Value == double.Parse(text, CultureInfo.InvariantCulture);
        });

    [Fact]
    public void Published_entries_of_the_error_queue_are_read()
    {
        JsonElement inputs = PublishedCase.Read("scpi-ieee4882.json", "error-queue").GetProperty("inputs");
        foreach (JsonElement example in inputs.GetProperty("examples").EnumerateArray())
        {
            Assert.Equal(example.GetProperty("number").GetInt32(), ErrorEntry.Parse(example.Text("text")).Number);
        }

        Assert.Equal(0, ErrorEntry.Parse(inputs.Text("empty queue")).Number);
        Assert.Equal("Data out of range;V 2", ErrorEntry.Parse("-222,\"Data out of range;V 2\"").Text);
        Assert.Throws<ScpiException>(() => ErrorEntry.Parse("No error"));
    }

    private static IEnumerable<JsonElement> Responses() => PublishedCase.Read("scpi-ieee4882.json", "number-formats")
        .GetProperty("inputs").GetProperty("responses").EnumerateArray();
}
