namespace ImpedanceScreen.Recording;

/// <summary>What happens to a board.</summary>
public enum Disposition
{
    /// <summary>Every limit is met at its rule.</summary>
    Pass,

    /// <summary>At least one limit is not met.</summary>
    Fail,

    /// <summary>Screen it again.</summary>
    Retest,

    /// <summary>The attempt came to no result.</summary>
    Aborted,
}
