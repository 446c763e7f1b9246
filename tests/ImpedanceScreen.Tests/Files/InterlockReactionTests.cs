using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Tests.Files;

public sealed class InterlockReactionTests
{
    /// <summary>
    /// 11 bits a character at 115200 bit/s; frame lengths of the MODBUS Application Protocol Specification V1.1b3,
    /// silent interval of MODBUS over Serial Line V1.02: worked by hand.
    /// </summary>
    [Fact]
    public void On_a_serial_line_characters_and_silence_count()
    {
        InterlockReaction reaction = InterlockReaction.WorstCase(FixtureFileBinder.Bind(SmallFiles.Fixture()).Value);
        const double character = 11.0 / 115.2;
        const double silence = 2 * 1.75;
        double writeA = 5 + silence + (18 * character);
        double readBackA = 5 + silence + (15 * character);
        double writeB = 4 + silence + (18 * character);
        double readBackB = 4 + silence + (15 * character);
        double readInputsB = 4 + silence + (14 * character);
        Assert.Equal(10.0, reaction.Poll.TotalMilliseconds, 3);
        Assert.Equal(writeA, reaction.Waiting.TotalMilliseconds, 3);
        Assert.Equal(readInputsB, reaction.Reading.TotalMilliseconds, 3);

        // Each unit has two runs of coils without a gap; a read-back bridges the gap between them.
        double allOpen = (2 * writeA) + readBackA + (2 * writeB) + readBackB;
        Assert.Equal(allOpen, reaction.AllOpen.TotalMilliseconds, 1e-3);
        Assert.Equal(10.0 + writeA + readInputsB + allOpen, reaction.Total.TotalMilliseconds, 1e-3);
    }

    [Fact]
    public void On_tcp_only_the_answer_times_count()
    {
        FixtureFile fixture = FixtureFileBinder.Bind(ShippedFiles.Read(ShippedFiles.SimulatedBench)).Value;
        InterlockReaction reaction = InterlockReaction.WorstCase(fixture);

        // Outputs: three runs of coils without a gap; the other two units: one each. One read-back for each unit.
        Assert.Equal(20.0 + 8.0 + 8.0 + ((3 + 1 + 1 + 3) * 8.0), reaction.Total.TotalMilliseconds, 9);
        Assert.Equal(
            "100 ms (poll period 20 + exchange under way 8 + reading inputs 8 + opening all 64)", reaction.ToString());
    }

    [Fact]
    public void The_silent_interval_grows_with_slow_lines()
    {
        FixtureFile fixture = FixtureFileBinder.Bind(SmallFiles.Fixture()).Value;
        SerialLink fast = Assert.IsType<SerialLink>(fixture.Links[0]);
        FixtureFile slow = fixture with { Links = [fast with { BaudRate = 9600 }, fixture.Links[1]] };
        const double character = 11.0 / 9.6;
        TimeSpan waiting = InterlockReaction.WorstCase(slow).Waiting;
        Assert.Equal(5 + (7 * character) + (18 * character), waiting.TotalMilliseconds, 3);
    }

    [Theory]
    [InlineData(ShippedFiles.SimulatedBench)]
    [InlineData(ShippedFiles.TwoSerialPorts)]
    public void The_shipped_fixtures_react_within_the_bound(string name)
    {
        InterlockReaction reaction = InterlockReaction.WorstCase(FixtureFileBinder.Bind(ShippedFiles.Read(name)).Value);
        Assert.True(reaction.Total <= InterlockReaction.Longest, reaction.ToString());
    }

    [Fact]
    public void A_calibration_is_overdue_from_the_day_after_it_was_due()
    {
        FixtureFile fixture = FixtureFileBinder.Bind(SmallFiles.Fixture()).Value;
        Assert.Empty(Calibration.Overdue(fixture, new DateOnly(2027, 1, 31)));
        Assert.Equal(
            "L1k,L10k,dmm",
            string.Join(',', Calibration.Overdue(fixture, new DateOnly(2027, 2, 1)).Select(item => item.Name)));
    }
}
