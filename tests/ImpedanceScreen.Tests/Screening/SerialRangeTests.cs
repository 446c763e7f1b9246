using ImpedanceScreen.Limits;
using ImpedanceScreen.Screening.Serials;

namespace ImpedanceScreen.Tests.Screening;

public sealed class SerialRangeTests
{
    [Fact]
    public void Counts_up_and_keeps_the_number_of_digits() =>
        Assert.Equal(["T6-000009", "T6-000010", "T6-000011"], SerialRange.From("T6-000009", 3));

    [Theory]
    [InlineData("T6-", 1)]
    [InlineData("T6-000001x", 1)]
    [InlineData("T6-99", 2)]
    [InlineData("", 1)]
    public void Refuses_what_cannot_be_counted(string first, int count) =>
        Assert.Throws<FormatException>(() => SerialRange.From(first, count));

    [Theory]
    [InlineData("T6-000001", true)]
    [InlineData("XT6-000001", false)]
    [InlineData("T6-0000012", false)]
    [InlineData("T6-000001\n", false)]
    public void A_pattern_is_matched_by_the_whole_serial_number(string serial, bool matches) =>
        Assert.Equal(matches, SerialNumber.Compile("T6-[0-9]{6}").IsMatch(serial));
}
