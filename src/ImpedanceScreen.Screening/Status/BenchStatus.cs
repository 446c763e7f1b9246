namespace ImpedanceScreen.Screening.Status;

/// <summary>What the bench is doing, as a whole: replaced, never changed.</summary>
/// <param name="Activity">What is being done.</param>
/// <param name="Lot">Lot; null where none.</param>
/// <param name="Serial">Serial number of the board in the nest; null where none.</param>
/// <param name="Doing">In words: output, drive state and load, or what is waited for.</param>
/// <param name="BoardFraction">Part of the present board that is done, 0 to 1.</param>
/// <param name="Planned">Boards the lot has in all; null where not known.</param>
/// <param name="Passed">Boards passed by this process.</param>
/// <param name="Failed">Boards failed.</param>
/// <param name="Retest">Boards to retest.</param>
/// <param name="Aborted">Attempts aborted.</param>
/// <param name="At">When this was published, UTC.</param>
public sealed record BenchStatus(
    Activity Activity,
    string? Lot,
    string? Serial,
    string Doing,
    double BoardFraction,
    int? Planned,
    int Passed,
    int Failed,
    int Retest,
    int Aborted,
    DateTimeOffset At)
{
    /// <summary>Boards that left the bench.</summary>
    public int Screened => Passed + Failed + Retest;
}

/// <summary>What a bench does.</summary>
public enum Activity
{
    /// <summary>Opening links and relays.</summary>
    Starting,

    /// <summary>Waiting for a serial number.</summary>
    AwaitingSerial,

    /// <summary>Waiting for a board or for the guard to close.</summary>
    AwaitingBoard,

    /// <summary>Switching, settling, reading.</summary>
    Measuring,

    /// <summary>Making the record durable.</summary>
    Recording,

    /// <summary>Telling the handler where the board goes.</summary>
    Sorting,

    /// <summary>A person is needed.</summary>
    OnHold,

    /// <summary>Ended.</summary>
    Ended,
}
