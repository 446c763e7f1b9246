using ImpedanceScreen.Benchmarks.Durability;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Tests.SimulatedBench;

namespace ImpedanceScreen.Tests.Station;

[Collection(RealTime.Name)]
public sealed class DurabilityTests
{
    private const string Log = "7</data/records.db-wal>";
    private const string Relays = "9<TCPv6:[[::ffff:127.0.0.1]:60006->[::ffff:127.0.0.1]:15020]>";
    private const string BusyOn = @"""\x00\x01\x00\x00\x00\x06\x03\x05\x00\x04\xff\x00"", 12, 0, NULL, 0) = 12";
    private const string PassOn = @"""\x00\x02\x00\x00\x00\x06\x03\x05\x00\x01\xff\x00"", 12, 0, NULL, 0) = 12";
    private const string AllOff = @"""\x00\x03\x00\x00\x00\x08\x03\x0f\x00\x00\x00\x06\x01\x00"", 14, 0, NULL, 0) = 14";
    private const string ManyOn = @"""\x00\x03\x00\x00\x00\x08\x03\x0f\x00\x00\x00\x06\x01\x22"", 14, 0, NULL, 0) = 14";

    [Fact]
    public async Task The_log_of_the_store_is_synced_before_a_sort_coil_is_written()
    {
        SortingReport report = await TracedLot.RunAsync(1, seed: 1);

        Assert.Empty(report.Violations);
        Assert.Equal(2, report.SortWrites);
    }

    [Fact]
    public void Records_synced_before_the_bin_are_accepted() => AssertViolations(
        0,
        $"11 sendto({Relays}, {BusyOn}", Written(11), Synced(11), Written(12), Synced(12),
        $"11 sendto({Relays}, {AllOff}", $"11 sendto({Relays}, {PassOn}");

    [Fact]
    public void A_log_write_without_sync_is_found() => AssertViolations(
        1, $"11 sendto({Relays}, {BusyOn}", Written(11), Synced(11), Synced(11), Written(12), $"11 sendto({Relays}, {PassOn}");

    [Fact]
    public void A_sync_that_has_not_come_back_is_none() => AssertViolations(
        1,
        $"11 sendto({Relays}, {BusyOn}", Written(11), Synced(11), Written(12), $"12 fsync({Log} <unfinished ...>",
        $"11 sendto({Relays}, {PassOn}", "12 <... fsync resumed>) = 0");

    [Fact]
    public void A_sync_covers_what_was_written_before_it_began() => AssertViolations(
        1,
        $"11 sendto({Relays}, {BusyOn}", Written(11), Synced(11), $"12 fsync({Log} <unfinished ...>", Written(11),
        "12 <... fsync resumed>) = 0", $"11 sendto({Relays}, {PassOn}");

    [Fact]
    public void A_sync_that_failed_is_none() => AssertViolations(
        1,
        $"11 sendto({Relays}, {BusyOn}", Written(11), Synced(11), Synced(11), Written(11),
        $"12 fdatasync({Log}) = -1 EIO (Input/output error)", $"11 sendto({Relays}, {PassOn}");

    [Fact]
    public void Several_coils_in_one_request_are_seen() => AssertViolations(
        1, $"11 sendto({Relays}, {BusyOn}", Written(11), $"11 sendto({Relays}, {ManyOn}");

    [Fact]
    public void A_board_sorted_without_a_record_of_its_own_is_found() => AssertViolations(
        1, Written(11), Synced(11), $"11 sendto({Relays}, {BusyOn}", Written(11), Synced(11), $"11 sendto({Relays}, {PassOn}");

    private static void AssertViolations(int expected, params string[] lines)
    {
        FixtureFile fixture = Tern6.Fixture;
        SortingReport report = SortingOrder.Judge(SystemCallTrace.Read(lines), fixture, 15020);
        Assert.Equal(1, report.SortWrites);
        Assert.Equal(expected, report.Violations.Count);
    }

    private static string Written(int thread) => $"{thread} pwrite64({Log}, \"\\x00\", 1, 0) = 1";

    private static string Synced(int thread) => $"{thread} fsync({Log}) = 0";
}
