namespace ImpedanceScreen.Screening.Serials;

/// <summary>Serial numbers known beforehand: boards come in this order.</summary>
public sealed class ListedSerials(IReadOnlyList<string> serials) : ISerialSource
{
    private int next;

    /// <inheritdoc/>
    public int? Count => serials.Count;

    /// <inheritdoc/>
    public bool ReadsTheBoard => false;

    /// <inheritdoc/>
    public ValueTask<string?> NextAsync(CancellationToken cancellation) =>
        new(next < serials.Count ? serials[next++] : null);
}
