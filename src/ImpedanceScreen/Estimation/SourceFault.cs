namespace ImpedanceScreen.Estimation;

/// <summary>What an output is instead of a linear source.</summary>
public enum SourceFaultKind
{
    /// <summary>The unloaded reading is near zero where a voltage is due.</summary>
    NoSource,

    /// <summary>The unloaded reading lies outside its window.</summary>
    UnloadedOutsideWindow,

    /// <summary>The voltage falls faster than a line beyond a knee current.</summary>
    CurrentLimited,

    /// <summary>Lack of fit beyond the uncertainty.</summary>
    Curved,

    /// <summary>Scatter beyond the meter's.</summary>
    Unstable,

    /// <summary>The meter's input exceeds its range.</summary>
    Overload,

    /// <summary>The meter gave no number.</summary>
    NoNumber,

    /// <summary>No proof that load current flowed: relay not closed or joint open.</summary>
    LoadNotProved,

    /// <summary>The output did not come back to its unloaded reading.</summary>
    NotRecovered,
}

/// <summary>A named fault with words that a technician acts on.</summary>
/// <param name="Kind">The fault.</param>
/// <param name="Words">What was seen and what to look at.</param>
/// <param name="OfFixture">True where the readings point at the fixture rather than the board.</param>
public sealed record SourceFault(SourceFaultKind Kind, string Words, bool OfFixture);
