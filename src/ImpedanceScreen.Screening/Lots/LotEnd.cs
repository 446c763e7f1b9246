using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Lots;

/// <summary>How working a lot ended.</summary>
/// <param name="Kind">The kind of end.</param>
/// <param name="Words">Why, and how to go on; empty when complete.</param>
/// <param name="Head">Head of the chain at the end.</param>
public sealed record LotEnd(LotEndKind Kind, string Words, ChainHead Head);

/// <summary>The kinds of end.</summary>
public enum LotEndKind
{
    /// <summary>Every board has its record.</summary>
    Complete,

    /// <summary>Told to stop: relays are open, an attempt under way was recorded as aborted.</summary>
    Stopped,

    /// <summary>The bench waits for a person.</summary>
    OnHold,

    /// <summary>Records cannot be made durable: nothing was sorted without its record.</summary>
    StoreFault,
}
