using ImpedanceScreen.Files;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Tests.Files;

public sealed class FixtureFileMistakeTests
{
    private const string Load = "load_banks[0].loads[0]";

    /// <summary>An edit of the small fixture file, and where which key is reported with which words.</summary>
    public static TheoryData<string, string, int, int, string, string> Cases => new()
    {
        // Names.
        {
            "link: line, unit_address: 2", "link: lien, unit_address: 2",
            10, 15, "relay_units[1].link", "did you mean `line`?"
        },
        { "sense: {unit: b,", "sense: {unit: c,", 59, 13, "outputs[0].sense.unit", "there is no relay unit `c`" },
        { "meter: dmm\n    load_bank", "meter: dvm\n    load_bank", 60, 5, "outputs[0].meter", "did you mean `dmm`?" },
        { "load_bank: bank", "load_bank: bunk", 61, 5, "outputs[0].load_bank", "did you mean `bank`?" },
        { "name: b, link", "name: a, link", 10, 6, "relay_units[1].name", "`a` is there already, at relay_units[0]" },
        { "- name: L10k", "- name: L1k", 38, 9, "load_banks[0].loads[1].name", "`L1k` is there already" },

        // Addresses.
        {
            "coil: 1, contact_input: 1", "coil: 0, contact_input: 1",
            39, 26, "load_banks[0].loads[1].relay.coil", "coil 0 of unit `a` is used already"
        },
        {
            "coil: 1, contact_input: 1", "coil: 1, contact_input: 0",
            39, 35, "load_banks[0].loads[1].relay.contact_input", "discrete input 0 of unit `a`"
        },
        {
            "interlock: {unit: b, input: 1}", "interlock: {unit: b, input: 0}",
            96, 24, "inputs.interlock.input", "by inputs.board_present"
        },
        {
            "  board_present: {unit: b, input: 0}\n", "",
            97, 1, "handshake", "nobody can tell when a sorted board has left"
        },
        {
            "fail_bin: {unit: b, coil: 4}", "fail_bin: {unit: b, coil: 3}",
            100, 23, "handshake.fail_bin.coil", "by handshake.pass_bin"
        },
        {
            "unit_address: 2", "unit_address: 1",
            10, 27, "relay_units[1].unit_address", "unit address 1 of link `line`"
        },
        { "unit_address: 2", "unit_address: 248", 10, 27, "relay_units[1].unit_address", "at most 247" },
        { "coil: 9}, voltage_v", "coil: 65536}, voltage_v", 11, 33, "board_supply.relay.coil", "at most 65535" },
        { "link: socket", "link: line", 69, 5, "meters[0].link", "is used by relay_units[0] too" },
        {
            "relay_units:",
            "  - {name: third, kind: tcp, host: meter.local, port: 5025, timeout_ms: 1, retries: 0}\nrelay_units:",
            8, 49, "links[2].port", "links[1] leads to the same place"
        },

        // Single values.
        { "kind: tcp", "kind: udp", 7, 20, "links[1].kind", "is none of: tcp, serial" },
        { "host: meter.local, ", "", 7, 5, "links[1].host", "the key is missing" },
        { "port: 5025", "port: 70000", 7, 50, "links[1].port", "at most 65535" },
        { "host: meter.local", "hots: meter.local", 7, 31, "links[1].hots", "did you mean `host`?" },
        { "stop_bits: 1", "stop_bits: 3", 6, 79, "links[0].stop_bits", "at most 2" },
        { "parity: even, stop_bits: 1", "parity: mark, stop_bits: 1", 6, 65, "links[0].parity", "none, even, odd" },
        {
            "retries: 1}", "retries: 1, echo_expected: yes}",
            6, 122, "links[0].echo_expected", "neither true nor false"
        },
        { "calibrated_on: 2026-01-31", "calibrated_on: 31.01.2026", 30, 9, Load + ".calibrated_on", "not a date" },
        { "calibrated_on: 2026-01-31", "calibrated_on: 2026-02-30", 30, 9, Load + ".calibrated_on", "not a date" },
        { "resistance_ohm: 1000.2", "resistance_ohm: 0", 26, 9, Load + ".resistance_ohm", "more than 0" },
        { "input_ohm: infinite", "input_ohm: .inf", 83, 9, "meters[0].ranges[0].input_ohm", "`.inf` is not a number" },
        {
            "noise_degrees_of_freedom: 60", "noise_degrees_of_freedom: 49",
            81, 9, "meters[0].ranges[0].noise_degrees_of_freedom", "at least 50"
        },

        // Values against one another.
        { "due_on: 2027-01-31", "due_on: 2025-01-31", 31, 9, Load + ".due_on", "due before it was made" },
        {
            "expanded_uncertainty_ohm: 0.2", "expanded_uncertainty_ohm: 2000",
            27, 9, Load + ".expanded_uncertainty_ohm", "as large as the resistance"
        },
        {
            "uncertainty_ohm: 0.6", "uncertainty_ohm: 1.1",
            43, 9, "load_banks[0].loads[1].common_standard_uncertainty_ohm", "larger than the whole"
        },
        { "full_scale_v: 10", "full_scale_v: 1", 76, 5, "meters[0].ranges", "not above the one before it" },
        {
            "power_line_cycles: 1", "power_line_cycles: 10",
            71, 5, "meters[0].integration_ms", "does not fit power_line_cycles"
        },
        {
            "timeout_ms: 250", "timeout_ms: 20",
            71, 5, "meters[0].integration_ms", "not below the time-out of link `socket`, 20 ms"
        },
        {
            "timeout_ms: 100", "timeout_ms: 5",
            9, 74, "relay_units[0].longest_answer_ms", "not below the time-out of link `line`, 5 ms"
        },
        { "watchdog_ms: 1000", "watchdog_ms: 10", 9, 96, "relay_units[0].watchdog_ms", "between two polls" },
        { "voltage_v: 12", "voltage_v: -61", 11, 43, "board_supply.voltage_v", "above 60 V DC" },
        {
            "off_below_v: 0.5", "off_below_v: 12",
            11, 96, "board_supply.off_below_v", "not below the supply's own voltage"
        },
        { "voltage_v: 5\n", "voltage_v: 61\n", 18, 5, "load_returns[0].voltage_v", "above 60 V DC" },
        { "at_once: 1", "at_once: 2", 55, 1, "outputs_loaded_at_once", "different groups" },
        { "common_return: {unit: a, coil: 8}\n", "", 12, 1, "load_returns", "short the rail" },
        {
            "coil: 0, contact_input: 0", "coil: 0",
            66, 5, "outputs[0].load_current_proof", "no contact_input is wired on: L1k"
        },
        { "poll_ms: 10", "poll_ms: 60", 97, 3, "inputs.poll_ms", "as late as" },
        { "baud: 115200", "baud: 2400", 97, 3, "inputs.poll_ms", "poll period 10 + exchange under way" },
        { "interlock: {unit: b, input: 1}\n", "\n", 95, 3, "inputs.interlock", "the key is missing" },
    };

    [Theory]
    [MemberData(nameof(Cases))]
    public void A_malformed_fixture_file_is_reported_with_place_key_and_words(
        string find, string replace, int line, int column, string key, string words)
    {
        FileText file = SmallFiles.Fixture(find, replace);
        Checked<FixtureFile> read = FixtureFileBinder.Bind(file);
        SmallFiles.AssertOne(read.Mistakes, file, line, column, key, words);
        Assert.False(read.TryGet(out _));
    }
}
