using ImpedanceScreen.Bench;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Handshakes;

namespace ImpedanceScreen.Tests.Screening;

public sealed class RestartFindingTests
{
    private static readonly HandshakeState AllOff = new(SortBin.None, Busy: false, Done: false);
    private static readonly HandshakeState BusyOnly = new(SortBin.None, Busy: true, Done: false);
    private static readonly HandshakeState BinSet = new(SortBin.Pass, Busy: true, Done: false);
    private static readonly HandshakeState DoneSet = new(SortBin.Pass, Busy: true, Done: true);

    /// <summary>A kill after each step of the handshake: what the next start must conclude.</summary>
    public static TheoryData<string, HandshakeState, bool, UnfinishedAttempt?, RestartFinding> AfterEachStep => new()
    {
        { "nothing begun, no board", AllOff, false, null, new RestartFinding.Fresh() },
        { "nothing begun, board present", AllOff, true, null, new RestartFinding.Fresh() },
        { "busy up, attempt row not committed", BusyOnly, true, null, new RestartFinding.Fresh() },
        { "attempt row committed", BusyOnly, true, Begun(null), new RestartFinding.ScreenAgain("T6-000001") },
        { "attempt row committed, coils fell", AllOff, true, Begun(null), new RestartFinding.ScreenAgain("T6-000001") },
        { "attempt row committed, board taken out", BusyOnly, false, Begun(null), new RestartFinding.Fresh() },
        { "aborted on request", BusyOnly, true, Begun(Disposition.Aborted), new RestartFinding.ScreenAgain("T6-000001") },
        { "record committed", BusyOnly, true, Begun(Disposition.Pass), new RestartFinding.ScreenAgain("T6-000001") },
        { "bin set", BinSet, true, Begun(Disposition.Pass), new RestartFinding.ScreenAgain("T6-000001") },
        { "done set, board still there", DoneSet, true, Begun(Disposition.Pass), new RestartFinding.Sorted() },
        { "done set, board gone", DoneSet, false, Begun(Disposition.Pass), new RestartFinding.Sorted() },
        { "coils fell after the record, board there", AllOff, true, Begun(Disposition.Pass), new RestartFinding.Unknown("T6-000001") },
        { "coils fell after the record, no board", AllOff, false, Begun(Disposition.Pass), new RestartFinding.Sorted() },
        { "attempt finished, done still on", DoneSet, false, null, new RestartFinding.Sorted() },
        { "attempt finished, busy still on", BusyOnly, false, null, new RestartFinding.Fresh() },
    };

    [Theory]
    [MemberData(nameof(AfterEachStep))]
    public void A_board_is_never_sorted_from_memory(
        string step, HandshakeState found, bool present, UnfinishedAttempt? last, RestartFinding expected)
    {
        Assert.NotEmpty(step);
        Assert.Equal(expected, RestartFinding.Of(found, present, last));
    }

    private static UnfinishedAttempt Begun(Disposition? recorded) =>
        new(new AttemptStart(Guid.Empty, "Tern-6", "T6-000001", "lot", "bench", DateTimeOffset.UnixEpoch), recorded);
}
