namespace ImpedanceScreen.Screening.Serials;

/// <summary>Where the serial number of the next board comes from.</summary>
public interface ISerialSource
{
    /// <summary>How many there are in all; null where not known beforehand.</summary>
    int? Count { get; }

    /// <summary>
    /// Whether each serial number is read off the board itself (typed or scanned). Otherwise it follows from the order
    /// of the boards, and after a restart nobody can say which board lies in the nest.
    /// </summary>
    bool ReadsTheBoard { get; }

    /// <summary>The next serial number; null at the end.</summary>
    ValueTask<string?> NextAsync(CancellationToken cancellation);
}
