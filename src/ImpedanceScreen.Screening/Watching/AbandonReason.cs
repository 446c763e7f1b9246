namespace ImpedanceScreen.Screening.Watching;

/// <summary>Why an attempt was given up from outside.</summary>
public enum AbandonReason
{
    /// <summary>The interlock opened.</summary>
    InterlockBroken,

    /// <summary>The board left the nest.</summary>
    BoardLifted,
}
