namespace ImpedanceScreen.Screening.Watching;

/// <summary>An input says that the attempt must not go on. Relays are to be opened at once.</summary>
public sealed class AttemptAbandonedException : Exception
{
    /// <summary>Makes the exception.</summary>
    public AttemptAbandonedException(AbandonReason reason)
        : base(Words(reason)) => Reason = reason;

    /// <summary>Which input.</summary>
    public AbandonReason Reason { get; }

    private static string Words(AbandonReason reason) => reason switch
    {
        AbandonReason.InterlockBroken =>
            "interlock broken: close the guard, release the emergency stop, then screen the board again",
        _ => "board left the nest during the attempt: seat it and screen it again",
    };
}
