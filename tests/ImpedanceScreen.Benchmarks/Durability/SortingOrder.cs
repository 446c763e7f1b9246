using System.Buffers.Binary;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Benchmarks.Durability;

/// <summary>What a trace says about records and sorting.</summary>
/// <param name="SortWrites">Writes that put a bin or the done coil on.</param>
/// <param name="Syncs">Syncs of the store's log.</param>
/// <param name="Violations">Sort writes that came before the log was synced.</param>
internal sealed record SortingReport(int SortWrites, int Syncs, IReadOnlyList<string> Violations);

/// <summary>
/// No bin and no done coil goes on before everything written to the store's log is synced; and from busy on to a bin
/// there are at least two syncs, one for the attempt begun and one for its record.
/// </summary>
internal static class SortingOrder
{
    private const int HeaderBytes = 7;

    /// <summary>Judges a trace.</summary>
    /// <param name="calls">The trace.</param>
    /// <param name="fixture">Where the handshake coils are.</param>
    /// <param name="port">TCP port of their link.</param>
    public static SortingReport Judge(IReadOnlyList<TracedCall> calls, FixtureFile fixture, int port)
    {
        Handshake handshake = fixture.Handshake!;
        Relay[] sorting =
        [
            handshake.PassBin, handshake.FailBin, handshake.Done,
            .. handshake.RetestBin is { } retest ? [retest] : Array.Empty<Relay>(),
        ];
        List<string> violations = [];
        int written = 0;
        int covered = 0;
        int syncs = 0;
        int syncsAtBusy = 0;
        int sortWrites = 0;
        foreach (TracedCall call in calls)
        {
            switch (call)
            {
                case TracedCall.LogWritten:
                    written++;
                    break;
                case TracedCall.LogSynced synced:
                    covered = Math.Max(covered, synced.Covered);
                    syncs++;
                    break;
                case TracedCall.Sent sent when sent.Port == port && PutsOn(sent.Request, fixture, handshake.Busy):
                    syncsAtBusy = syncs;
                    break;
                case TracedCall.Sent sent when sent.Port == port && sorting.Any(relay => PutsOn(sent.Request, fixture, relay)):
                    sortWrites++;
                    if (covered < written)
                    {
                        violations.Add($"sort write {sortWrites}: {written - covered} writes of the log not synced");
                    }
                    else if (syncs - syncsAtBusy < 2)
                    {
                        violations.Add($"sort write {sortWrites}: {syncs - syncsAtBusy} syncs since busy");
                    }

                    break;
            }
        }

        return new SortingReport(sortWrites, syncs, violations);
    }

    // Modbus Application Protocol V1.1b3: 05 write single coil, 15 write multiple coils, behind the MBAP header.
    private static bool PutsOn(ReadOnlySpan<byte> request, FixtureFile fixture, Relay relay)
    {
        if (request.Length < HeaderBytes + 5
            || request[HeaderBytes - 1] != fixture.RelayUnits.First(unit => unit.Name == relay.Unit).UnitAddress)
        {
            return false;
        }

        int first = BinaryPrimitives.ReadUInt16BigEndian(request[(HeaderBytes + 1)..]);
        switch (request[HeaderBytes])
        {
            case 5:
                return first == relay.Coil && request[HeaderBytes + 3] == 0xFF;
            case 15:
                int bit = relay.Coil - first;
                int count = BinaryPrimitives.ReadUInt16BigEndian(request[(HeaderBytes + 3)..]);
                return bit >= 0 && bit < count && (request[HeaderBytes + 6 + (bit / 8)] >> (bit % 8) & 1) == 1;
            default:
                return false;
        }
    }
}
