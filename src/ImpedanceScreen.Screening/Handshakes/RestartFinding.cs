using ImpedanceScreen.Bench;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Handshakes;

/// <summary>What a restarted program concludes about the board in the nest.</summary>
public abstract record RestartFinding
{
    /// <summary>No board was under way.</summary>
    public sealed record Fresh : RestartFinding;

    /// <summary>The board was sorted; only its leaving was not seen to the end.</summary>
    public sealed record Sorted : RestartFinding;

    /// <summary>The board was not sorted: it is read again, or screened again under the same serial number.</summary>
    /// <param name="Serial">The serial number it was begun under.</param>
    public sealed record ScreenAgain(string Serial) : RestartFinding;

    /// <summary>Nobody can say from memory which board lies in the nest.</summary>
    /// <param name="Serial">The board that may or may not have left.</param>
    public sealed record Unknown(string Serial) : RestartFinding;

    /// <summary>
    /// Concludes from the handshake coils as found, the inputs, and the last attempt whose handshake did not end. A
    /// board is never sorted from memory.
    /// </summary>
    /// <param name="found">Coils as found; null where the bench has none.</param>
    /// <param name="boardPresent">Board-present input.</param>
    /// <param name="last">The last unfinished attempt; null where there is none.</param>
    public static RestartFinding Of(HandshakeState? found, bool boardPresent, UnfinishedAttempt? last)
    {
        if (last is null)
        {
            // Done or busy without an attempt: another program's board, or busy went up just before the attempt's row.
            return found is { Done: true } ? new Sorted() : new Fresh();
        }

        bool recorded = last.Recorded is not null and not Disposition.Aborted;
        if (recorded && (found is { Done: true } || !boardPresent))
        {
            return new Sorted();
        }

        if (!boardPresent)
        {
            return new Fresh();
        }

        // A handler lifts a board only at done, and busy falls last: busy still on means the same board is there. So
        // does an attempt without record, which was never told to leave. Where the coils fell by themselves (power,
        // watchdog) after a record, the board may have left and another come.
        return !recorded || found is { Busy: true } ? new ScreenAgain(last.Start.Serial) : new Unknown(last.Start.Serial);
    }
}
