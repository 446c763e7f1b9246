namespace ImpedanceScreen.Decisions;

/// <summary>A decision about one quantity, one output or a whole board.</summary>
public enum Decision
{
    /// <summary>Inside the limit by at least the guard band.</summary>
    Pass,

    /// <summary>Outside the limit by at least the guard band.</summary>
    Fail,

    /// <summary>Neither.</summary>
    Undecided,
}
