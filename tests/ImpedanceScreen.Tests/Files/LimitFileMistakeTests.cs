using ImpedanceScreen.Files;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Tests.Files;

public sealed class LimitFileMistakeTests
{
    private const string State = "outputs[0].states[0]";

    /// <summary>An edit of the small limit file, and where which key is reported with which words.</summary>
    public static TheoryData<string, string, int, int, string, string> Cases => new()
    {
        // The text as a whole.
        { "undecided: retest", "undecided: [retest", 7, 12, "", "not readable as YAML" },
        { "undecided: retest", "\tundecided: retest", 7, 1, "", "found a tab character" },
        {
            "settle_ms: 20", "settle_ms: 20\n        readings_per_load_point: 4\n---\nkind: limits\n#",
            22, 1, "", "a second document begins"
        },
        { "outputs:", "outputs: &all", 8, 10, "", "an anchor (`&all`) is not allowed" },
        { "product: Probe", "product: !!str Probe", 3, 10, "", "a tag (`tag:yaml.org,2002:str`) is not allowed" },
        { "undecided: retest", "<<: {undecided: retest}\nundecided: retest", 7, 1, "<<", "a merge key is not allowed" },
        { "product: Probe", "product: Probe\nproduct: Probe", 4, 1, "product", "stands twice, first in line 3" },
        { "stimulus: pull-low", "? [a, b]\n        : 1", 23, 11, "", "a list or mapping cannot be a key" },

        // Keys.
        { "kind: limits", "kind: fixture", 1, 1, "kind", "of kind `fixture`, not `limits`" },
        { "format: 1", "format: 2", 2, 1, "format", "must be at least 1 and at most 1" },
        { "product: Probe", "product:", 3, 1, "product", "the value is missing" },
        { "product: Probe", "product: ~", 3, 1, "product", "the value is missing" },
        { "product: Probe", "product: null", 3, 1, "product", "the value is missing" },
        { "product: Probe", "product: \"\"", 3, 1, "product", "the value is missing" },
        { "revision: 1.10\n", "", 1, 1, "revision", "the key is missing" },
        { "current_a: 0.01, ", "", 19, 18, State + ".allowed.current_a", "the key is missing" },
        {
            "load_return: rail", "load_retrun: rail",
            26, 9, "outputs[0].states[1].load_retrun", "did you mean `load_return`?"
        },
        {
            "load_return: rail", "qqqqqqqqqq: rail",
            26, 9, "outputs[0].states[1].qqqqqqqqqq", "known here: allowed, limits"
        },

        // Single values.
        { "settle_ms: 20", "settle_ms: soon", 20, 9, State + ".settle_ms", "`soon` is not a number" },
        { "settle_ms: 20", "settle_ms: \"20\"", 20, 9, State + ".settle_ms", "is text, not a number" },
        { "settle_ms: 20", "settle_ms: [20]", 20, 9, State + ".settle_ms", "must be a single value" },
        { "settle_ms: 20", "settle_ms: 1,000", 20, 9, State + ".settle_ms", "`1,000` is not a number" },
        { "settle_ms: 20", "settle_ms: 1_000", 20, 9, State + ".settle_ms", "`1_000` is not a number" },
        { "settle_ms: 20", "settle_ms: 0x14", 20, 9, State + ".settle_ms", "`0x14` is not a number" },
        { "settle_ms: 20", "settle_ms: 024", 20, 9, State + ".settle_ms", "begins with 0" },
        { "settle_ms: 20", "settle_ms: NaN", 20, 9, State + ".settle_ms", "`NaN` is not a finite number" },
        { "settle_ms: 20", "settle_ms: .nan", 20, 9, State + ".settle_ms", "`.nan` is not a number" },
        { "settle_ms: 20", "settle_ms: 1e999", 20, 9, State + ".settle_ms", "not a finite number" },
        { "settle_ms: 20", "settle_ms: -1", 20, 9, State + ".settle_ms", "must be at least 0 and at most 60000" },
        { "point: 4", "point: 4.0", 21, 9, State + ".readings_per_load_point", "`4.0` is not a whole number" },
        { "point: 4", "point: 101", 21, 9, State + ".readings_per_load_point", "must be at least 1 and at most 100" },
        { "undecided: retest", "undecided: retets", 7, 1, "undecided", "did you mean `retest`?" },
        { "undecided: retest", "undecided: perhaps", 7, 1, "undecided", "is none of: retest, fail" },
        {
            "allowed: {current_a: 0.01, power_w: 0.05, dwell_s: 2}", "allowed: 5",
            19, 9, State + ".allowed", "must be a mapping"
        },
        { "loads: [L10k, L1k]", "loads: L10k", 14, 9, State + ".loads", "must be a list" },
        { "loads: [L10k, L1k]", "loads: [L10k, {a: 1}]", 14, 23, State + ".loads[1]", "is not a single text" },
        { "loads: [L10k, L1k]", "loads: [L10k, L10k]", 14, 23, State + ".loads[1]", "`L10k` stands twice" },
        { "  - name: OUT", "  - 5\n  - name: OUT", 9, 5, "outputs[0]", "is not a mapping" },

        // Values against one another.
        { "loads: [L10k, L1k]", "loads: [L1k]", 14, 9, State + ".loads", "nothing tests that the source is linear" },
        { "ceiling_v: 12", "ceiling_v: 60.5", 6, 1, "voltage_ceiling_v", "above 60 V DC" },
        {
            "undecided:", "voltage_ceiling_v_ac_rms: 25.1\nundecided:",
            7, 1, "voltage_ceiling_v_ac_rms", "above 25 V AC rms"
        },
        {
            "ceiling_v: 12", "ceiling_v: 5.2",
            13, 9, State + ".unloaded_window_v", "beyond the file's `voltage_ceiling_v`"
        },
        { "min: 4.5, max: 5.5", "min: 5.5, max: 4.5", 13, 29, State + ".unloaded_window_v.min", "the window is empty" },
        {
            "min: 4.5, max: 5.5", "min: 5.1, max: 5.5",
            13, 9, State + ".unloaded_window_v", "does not hold the nominal"
        },
        {
            "min: 4.9, max: 5.1", "min: 5.1, max: 4.9",
            16, 30, State + ".limits.source_voltage_v.min", "min is not below max"
        },
        { "min: 4.9, max: 5.1, ", "", 16, 11, State + ".limits.source_voltage_v", "neither `min` nor `max`" },
        { "min: 4.9, max: 5.1", "max: 4.9", 15, 9, State + ".limits", "`source_voltage_v` refuses the nominal" },
        { "max: 12, rule", "max: 9, rule", 15, 9, State + ".limits", "`droop_percent` refuses the nominal" },
        { "rated_load_ohm: 1000, ", "", 18, 26, State + ".limits.droop_percent.rated_load_ohm", "the key is missing" },
        { ", guard_factor: 1.0", "", 16, 29, State + ".limits.source_voltage_v.guard_factor", "the key is missing" },
        {
            "guard_factor: 1.0", "guard_factor: 0",
            16, 65, State + ".limits.source_voltage_v.guard_factor", "more than 0"
        },
        {
            "max: 120, rule: simple", "max: 120, rule: simple, guard_factor: 1", 17, 61,
            State + ".limits.internal_resistance_ohm.guard_factor", "a simple rule has no guard band"
        },
        {
            "internal_resistance_ohm: {min: 40, max: 60, rule: simple}", "{}", 28, 9,
            "outputs[0].states[1].limits", "nothing is limited"
        },
        {
            "internal_resistance_ohm: {min: 40, max: 60, rule: simple}",
            "droop_percent: {rated_load_ohm: 9, max: 90, rule: simple}",
            28, 9, "outputs[0].states[1].limits", "has no meaning here"
        },
        { "name: low", "name: idle", 22, 9, "outputs[0].states[1].name", "`idle` is there already" },
        { "P[0-9]{4}", "P[0-9", 5, 1, "serial_pattern", "not a regular expression" },
        { "P[0-9]{4}", "a)(b", 5, 1, "serial_pattern", "not a regular expression" },
        { "P[0-9]{4}", "(?<=P)[0-9]", 5, 1, "serial_pattern", "can take for ever" },
    };

    [Theory]
    [MemberData(nameof(Cases))]
    public void A_malformed_limit_file_is_reported_with_place_key_and_words(
        string find, string replace, int line, int column, string key, string words)
    {
        FileText file = SmallFiles.Limits(find, replace);
        Checked<LimitFile> read = LimitFileBinder.Bind(file);
        SmallFiles.AssertOne(read.Mistakes, file, line, column, key, words);
        Assert.False(read.TryGet(out _));
    }
}
