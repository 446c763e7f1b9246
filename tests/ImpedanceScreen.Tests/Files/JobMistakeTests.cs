using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Files;

public sealed class JobMistakeTests
{
    private const string Idle = "outputs[0].states[0]";
    private const string Low = "outputs[0].states[1]";

    /// <summary>An edit of the small limit file that makes it unfit for the small fixture.</summary>
    public static TheoryData<string, string, int, int, string, string> LimitCases => new()
    {
        { "name: OUT", "name: AUT", 9, 5, "outputs[0].name", "the fixture has no output `AUT`; did you mean `OUT`?" },
        { "L10k, L1k", "L10k, L2k", 14, 23, Idle + ".loads[1]", "the fixture has no load `L2k`; did you mean `L1k`?" },
        {
            "pull-low", "pull-lwo",
            23, 9, Low + ".stimulus", "the fixture has no stimulus `pull-lwo`; did you mean `pull-low`?"
        },
        {
            "load_return: rail", "load_return: vcc",
            26, 9, Low + ".load_return", "no load return `vcc`; choose one of: rail"
        },
        { "max: 5.5", "max: 10.5", 13, 9, Idle + ".unloaded_window_v", "no range of meter `dmm` holds 10.5 V" },
        {
            "current_a: 0.01", "current_a: 0.005",
            14, 23, Idle + ".loads[1]", "may draw 0.0055, more than the 0.005 A the output is allowed"
        },
        { "power_w: 0.05", "power_w: 0.03", 14, 23, Idle + ".loads[1]", "more than the 0.03 W the output is allowed" },
        { "dwell_s: 2", "dwell_s: 0.2", 19, 51, Idle + ".allowed.dwell_s", "under load for 0.204 s" },
        {
            "rated_load_ohm: 1000", "rated_load_ohm: 900",
            18, 27, Idle + ".limits.droop_percent.rated_load_ohm", "nothing is extrapolated"
        },
        {
            "source_voltage_v: 0.1, internal_resistance_ohm: 50}\n        unloaded_window_v: {min: -0.1, max: 0.4}",
            "source_voltage_v: 5.0, internal_resistance_ohm: 50}\n        unloaded_window_v: {min: -0.1, max: 5.2}",
            26, 9, Low + ".load_return", "no load current flows"
        },
    };

    /// <summary>An edit of the small limit file after which the guard bands leave nothing that could pass.</summary>
    public static TheoryData<string, string, int, int, string, string> AcceptanceCases => new()
    {
        {
            "{min: 4.9, max: 5.1, rule: guarded", "{min: 4.99999, max: 5.00001, rule: guarded",
            16, 11, Idle + ".limits.source_voltage_v", "guard bands of 1 x"
        },
        {
            "{min: 40, max: 60, rule: simple}", "{min: 49.999, max: 50.001, rule: guarded, guard_factor: 2}",
            29, 11, Low + ".limits.internal_resistance_ohm", "guard bands of 2 x"
        },
    };

    /// <summary>An edit of the small fixture file that makes it unfit for the small limit file.</summary>
    public static TheoryData<string, string, int, int, string, string> FixtureCases => new()
    {
        {
            "voltage_v: 12,", "voltage_v: 13,",
            11, 43, "board_supply.voltage_v", "above the product's voltage ceiling of 12 V"
        },
        {
            "voltage_v: 5\n", "voltage_v: 12.5\n",
            18, 5, "load_returns[0].voltage_v", "above the product's voltage ceiling of 12 V"
        },
    };

    /// <summary>An edit of the small fixture file after which a load of the limit file may not be closed.</summary>
    public static TheoryData<string, string, int, int, string, string> LoadingCases => new()
    {
        {
            "power_rating_w: 0.6", "power_rating_w: 0.14",
            14, 23, Idle + ".loads[1]", "may take 0.144, more than the 0.14 W it is rated for"
        },
        {
            "current_limit_a: 0.1", "current_limit_a: 0.005",
            27, 23, Low + ".loads[1]", "A that rail `rail` is limited to"
        },
    };

    [Theory]
    [MemberData(nameof(LimitCases))]
    [MemberData(nameof(AcceptanceCases))]
    public void A_limit_file_that_does_not_fit_the_fixture_is_reported_where_it_does_not(
        string find, string replace, int line, int column, string key, string words)
    {
        FileText limits = SmallFiles.Limits(find, replace);
        SmallFiles.AssertOne(Bind(limits, SmallFiles.Fixture()).Mistakes, limits, line, column, key, words);
    }

    [Theory]
    [MemberData(nameof(FixtureCases))]
    public void A_fixture_that_brings_more_voltage_than_the_product_bears_is_reported_in_the_fixture_file(
        string find, string replace, int line, int column, string key, string words)
    {
        FileText fixture = SmallFiles.Fixture(find, replace);
        IReadOnlyList<Mistake> mistakes = Bind(SmallFiles.Limits(), fixture).Mistakes;
        SmallFiles.AssertOne([.. mistakes.Where(item => item.File == fixture.Name)], fixture, line, column, key, words);
    }

    [Theory]
    [MemberData(nameof(LoadingCases))]
    public void A_load_that_the_fixture_cannot_bear_is_reported_at_the_plan_that_names_it(
        string find, string replace, int line, int column, string key, string words)
    {
        FileText limits = SmallFiles.Limits();
        SmallFiles.AssertOne(
            Bind(limits, SmallFiles.Fixture(find, replace)).Mistakes, limits, line, column, key, words);
    }

    [Fact]
    public void An_output_of_zero_volt_draws_no_current_from_common()
    {
        string text = SmallFiles.LimitsText;
        (string Find, string Replace)[] edits =
        [
            ("nominal: {source_voltage_v: 5,", "nominal: {source_voltage_v: 0,"),
            ("{min: 4.5, max: 5.5}", "{min: -0.5, max: 0.5}"),
            ("          source_voltage_v: {min: 4.9, max: 5.1, rule: guarded, guard_factor: 1.0}\n", ""),
            ("          droop_percent: {rated_load_ohm: 1000, max: 12, rule: simple}\n", ""),
        ];
        foreach ((string find, string replace) in edits)
        {
            text = SmallFiles.Edit(text, find, replace);
        }

        FileText limits = new(SmallFiles.LimitsName, text);
        SmallFiles.AssertOne(
            Bind(limits, SmallFiles.Fixture()).Mistakes, limits, 12, 19, Idle + ".nominal.source_voltage_v",
            "no load current flows");
    }

    [Fact]
    public void A_limit_that_a_zero_change_satisfies_is_refused_where_no_change_can_prove_load_current()
    {
        FileText limits = SmallFiles.Limits("internal_resistance_ohm: 100}", "internal_resistance_ohm: 0}");
        FileText proved = SmallFiles.Fixture("two-wire", "terminal");
        FileText unproved = new(proved.Name, SmallFiles.Edit(proved.Text, "contact-readback", "change-from-unloaded"));
        SmallFiles.AssertOne(
            Bind(limits, proved).Mistakes, limits, 17, 11, Idle + ".limits.internal_resistance_ohm",
            "a contact shows that its relay moved, not that current flowed");
        SmallFiles.AssertOne(
            Bind(limits, unproved).Mistakes, limits, 17, 11, Idle + ".limits.internal_resistance_ohm",
            "a load that never came on would satisfy it");
    }

    [Fact]
    public void A_change_too_small_to_prove_load_current_is_refused_even_where_no_limit_holds_zero()
    {
        string onlyVoltage = SmallFiles.Edit(
            SmallFiles.Edit(SmallFiles.LimitsText, "          internal_resistance_ohm: {max: 120, rule: simple}\n", ""),
            "          droop_percent: {rated_load_ohm: 1000, max: 12, rule: simple}\n", "");
        FileText limits = new(
            SmallFiles.LimitsName, SmallFiles.Edit(onlyVoltage, "resistance_ohm: 100}", "resistance_ohm: 0}"));
        string terminal = SmallFiles.Edit(SmallFiles.FixtureText, "two-wire", "terminal");
        FileText fixture = new(
            SmallFiles.FixtureName, SmallFiles.Edit(terminal, "contact-readback", "change-from-unloaded"));
        SmallFiles.AssertOne(
            Bind(limits, fixture).Mistakes, limits, 14, 9, Idle + ".loads", "no load point would count");
    }

    [Fact]
    public void A_change_of_many_uncertainties_is_proof_enough()
    {
        FileText fixture = SmallFiles.Fixture("contact-readback", "change-from-unloaded");
        Assert.Empty(Bind(SmallFiles.Limits(), fixture).Mistakes);
    }

    [Fact]
    public void Mistakes_of_both_files_are_all_reported_the_limit_files_first()
    {
        FileText limits = SmallFiles.Limits("dwell_s: 2", "dwell_s: 0.1");
        FileText fixture = SmallFiles.Fixture("voltage_v: 12,", "voltage_v: -13,");
        IReadOnlyList<Mistake> mistakes = Bind(limits, fixture).Mistakes;
        Assert.Collection(
            mistakes,
            first => Assert.Equal((SmallFiles.LimitsName, Idle + ".allowed.dwell_s"), (first.File, first.Key)),
            second => Assert.Equal((SmallFiles.FixtureName, "board_supply.voltage_v"), (second.File, second.Key)));
    }

    private static Checked<ScreeningJob> Bind(FileText limits, FileText fixture) =>
        JobBinder.Bind(LimitFileBinder.Bind(limits).Value, FixtureFileBinder.Bind(fixture).Value);
}
