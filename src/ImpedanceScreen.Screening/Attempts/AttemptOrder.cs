using ImpedanceScreen.Jobs;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>One board to be put through once.</summary>
/// <param name="AttemptId">Identifier of the attempt.</param>
/// <param name="Job">What it is measured against.</param>
/// <param name="Serial">Serial number.</param>
/// <param name="Attempt">Number of this attempt at the serial number, from 1.</param>
/// <param name="PreviousAttemptId">The attempt before; null for the first.</param>
/// <param name="FailedBefore">Whether an earlier attempt failed: then this one cannot make it a pass.</param>
/// <param name="Lot">Lot; null where none.</param>
/// <param name="Operator">Operator; null where not stated.</param>
/// <param name="StartedAt">UTC.</param>
public sealed record AttemptOrder(
    Guid AttemptId,
    ScreeningJob Job,
    string Serial,
    int Attempt,
    Guid? PreviousAttemptId,
    bool FailedBefore,
    string? Lot,
    string? Operator,
    DateTimeOffset StartedAt);
