using System.Globalization;
using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Files;

public sealed class ReadingTests
{
    [Fact]
    public void Text_that_looks_like_a_number_stays_as_it_is_written()
    {
        LimitFile limits = LimitFileBinder.Bind(SmallFiles.Limits("product: Probe", "product: 007")).Value;
        Assert.Equal(("007", "1.10"), (limits.Product, limits.Revision));
        FixtureFile fixture = FixtureFileBinder.Bind(SmallFiles.Fixture()).Value;
        Assert.Equal("0042", fixture.LoadBanks[0].Loads[0].Certificate);
    }

    [Fact]
    public void A_limit_file_is_bound_to_base_units()
    {
        DriveState state = LimitFileBinder.Bind(SmallFiles.Limits()).Value.Outputs[0].States[0];
        Assert.Equal(new NominalSource(5.0, 100.0), state.Nominal);
        Assert.Equal(TimeSpan.FromMilliseconds(20), state.Settle);
        Assert.Equal(TimeSpan.FromSeconds(2), state.Allowed.Dwell);
        Assert.Equal(
            [
                new QuantityLimit(Quantity.SourceVoltage, 4.9, 5.1, new DecisionRule(1.0), null),
                new QuantityLimit(Quantity.InternalResistance, null, 120.0, DecisionRule.Simple, null),
                new QuantityLimit(Quantity.Droop, null, 0.12, DecisionRule.Simple, 1000.0),
            ],
            state.Limits);
    }

    [Fact]
    public void A_fixture_file_is_bound_to_base_units()
    {
        FixtureFile fixture = FixtureFileBinder.Bind(SmallFiles.Fixture()).Value;
        Load load = fixture.LoadBanks[0].Loads[0];
        Assert.Equal(new Relay("a", 0, 0), load.Relay);
        Assert.Equal(10e-6, load.TemperatureCoefficientPerKelvin, 12);
        Assert.Equal(0.1, load.StandardUncertaintyOhm, 12);
        Assert.Null(load.CommonUncertaintyOhm);
        Assert.Equal(new DateOnly(2027, 1, 31), load.DueOn);
        MeterRange range = fixture.Meters[0].Ranges[1];
        Assert.Equal(25e-6, range.GainLimit, 12);
        Assert.Equal(50e-6, range.OffsetLimitVolt, 12);
        Assert.Equal(15e-6, range.NoiseVolt, 12);
        Assert.Equal(double.PositiveInfinity, fixture.Meters[0].Ranges[0].InputOhm);
        Assert.Equal(LineParity.Even, Assert.IsType<SerialLink>(fixture.Links[0]).Parity);
        Assert.Null(fixture.RelayUnits[1].WatchdogSilence);
    }

    [Fact]
    public void A_job_lists_loads_by_ascending_current_and_takes_the_smallest_range_that_holds_all_voltages()
    {
        LimitFile limits = LimitFileBinder.Bind(SmallFiles.Limits("[L10k, L1k]", "[L1k, L10k]")).Value;
        ScreeningJob job = JobBinder.Bind(limits, FixtureFileBinder.Bind(SmallFiles.Fixture()).Value).Value;
        Assert.Equal("L10k,L1k", string.Join(',', job.States[0].Loads.Select(load => load.Name)));
        Assert.Equal(10.0, job.States[0].Range.FullScaleVolt);

        // The low state's own window fits the 1 V range, the rail that is read beside it does not.
        Assert.Equal(10.0, job.States[1].Range.FullScaleVolt);
        Assert.Equal("rail", job.States[1].LoadReturn?.Name);
    }

    [Fact]
    public void All_mistakes_of_a_file_are_reported_at_once_in_the_order_of_their_places()
    {
        string text = SmallFiles.Edit(SmallFiles.LimitsText, "revision: 1.10", "revision:");
        text = SmallFiles.Edit(text, "settle_ms: 20", "settle_ms: x");
        text = SmallFiles.Edit(text, "min: 4.9", "min: 9.9");
        text = SmallFiles.Edit(text, "undecided: retest", "undecidde: retest");
        IReadOnlyList<Mistake> mistakes = LimitFileBinder.Bind(new("many", text)).Mistakes;
        Assert.Equal("4,7,16,20", string.Join(',', mistakes.Select(mistake => mistake.Mark.Line)));
    }

    [Fact]
    public void A_check_whose_input_is_wrong_is_skipped_and_not_guessed()
    {
        string text = SmallFiles.Edit(SmallFiles.FixtureText, "name: line", "name: [line]");
        Mistake mistake = Assert.Single(FixtureFileBinder.Bind(new("skipped", text)).Mistakes);
        Assert.Equal("links[0].name", mistake.Key);
    }

    [Theory]
    [InlineData("relay: {unit: a, coil: 0, contact_input: 0}", "relay: *gone", 25, 16)]
    [InlineData("relay: {unit: a, coil: 0, contact_input: 0}", "relay: {unit: *gone, coil: 0}", 25, 23)]
    [InlineData("interlock: {unit: b, input: 1}", "interlock: *gone", 96, 14)]
    [InlineData("links:\n", "links:\n  - *gone\n", 6, 5)]
    public void An_alias_is_reported_once_and_what_it_stood_for_is_not_guessed(
        string find, string replace, int line, int column)
    {
        Mistake mistake = Assert.Single(FixtureFileBinder.Bind(SmallFiles.Fixture(find, replace)).Mistakes);
        Assert.Equal(new Mark(line, column), mistake.Mark);
        Assert.Contains("an alias", mistake.Problem, StringComparison.Ordinal);
    }

    [Fact]
    public void A_comma_culture_changes_neither_values_nor_messages()
    {
        CultureInfo comma = (CultureInfo)CultureInfo.InvariantCulture.Clone();
        comma.NumberFormat.NumberDecimalSeparator = ",";
        comma.NumberFormat.NumberGroupSeparator = ".";
        comma.NumberFormat.NegativeSign = "~";
        CultureInfo before = CultureInfo.CurrentCulture;
        (string Messages, double Volt, double Ohm) plain = ReadAll();
        try
        {
            CultureInfo.CurrentCulture = comma;
            Assert.Equal(plain, ReadAll());
        }
        finally
        {
            CultureInfo.CurrentCulture = before;
        }

        Assert.Equal((4.9, 1000.2), (plain.Volt, plain.Ohm));
    }

    [Fact]
    public void A_file_that_is_too_large_or_too_deep_is_refused()
    {
        string large = new('#', YamlTree.LargestBytes + 1);
        Assert.Contains("larger than 1 MiB", Single(large).Problem, StringComparison.Ordinal);
        string deep = "a: " + new string('[', 400_000);
        Assert.Contains("deeper than 16 levels", Single(deep).Problem, StringComparison.Ordinal);
        Assert.Contains("empty", Single("# nothing\n").Problem, StringComparison.Ordinal);

        static Mistake Single(string text) => Assert.Single(LimitFileBinder.Bind(new("odd", text)).Mistakes);
    }

    [Theory]
    [InlineData("coli", "coil")]
    [InlineData("Coil", "coil")]
    [InlineData("resistance", "resistance_ohm")]
    [InlineData("bank", null)]
    [InlineData("", null)]
    public void The_nearest_name_is_found_within_a_third_of_its_length(string written, string? nearest) =>
        Assert.Equal(nearest, Nearest.To(written, ["unit", "coil", "resistance_ohm", "contact_input"]));

    [Theory]
    [InlineData("P1234", true)]
    [InlineData("P12345", false)]
    [InlineData("xP1234", false)]
    [InlineData("P1234\n", false)]
    [InlineData("Q9", true)]
    public void A_serial_number_matches_its_pattern_as_a_whole(string serial, bool matches) =>
        Assert.Equal(matches, SerialNumber.Compile("P[0-9]{4}|Q9").IsMatch(serial));

    private static (string Messages, double Volt, double Ohm) ReadAll()
    {
        LimitFile limits = LimitFileBinder.Bind(SmallFiles.Limits("max: 5.5", "max: 10.5")).Value;
        LimitFile weak = LimitFileBinder.Bind(SmallFiles.Limits("current_a: 0.01", "current_a: 0.0015")).Value;
        FixtureFile fixture = FixtureFileBinder.Bind(SmallFiles.Fixture("voltage_v: 12,", "voltage_v: -12.5,")).Value;
        string messages = string.Join(
            "\n",
            JobBinder.Bind(limits, fixture).Mistakes
                .Concat(JobBinder.Bind(weak, fixture).Mistakes)
                .Concat(FixtureFileBinder.Bind(SmallFiles.Fixture("poll_ms: 10", "poll_ms: 60.5")).Mistakes)
                .Concat(FixtureFileBinder.Bind(SmallFiles.Fixture("off_below_v: 0.5", "off_below_v: -0.5")).Mistakes)
                .Concat(FixtureFileBinder.Bind(SmallFiles.Fixture("timeout_ms: 250", "timeout_ms: 19.5")).Mistakes));
        QuantityLimit limit = limits.Outputs[0].States[0].Limits[0];
        return (messages, limit.Min!.Value, fixture.LoadBanks[0].Loads[0].ResistanceOhm);
    }
}
