using System.Threading.Channels;

namespace ImpedanceScreen.Screening.Serials;

/// <summary>Serial numbers typed or scanned, one a line, until the input ends or the count is reached.</summary>
/// <param name="lines">The lines as they come.</param>
/// <param name="count">Most boards to take; null for as many as come.</param>
/// <param name="prompt">Called each time one is awaited.</param>
public sealed class ScannedSerials(ChannelReader<string> lines, int? count, Action prompt) : ISerialSource
{
    private int taken;

    /// <inheritdoc/>
    public int? Count => count;

    /// <inheritdoc/>
    public bool ReadsTheBoard => true;

    /// <inheritdoc/>
    public async ValueTask<string?> NextAsync(CancellationToken cancellation)
    {
        if (taken >= count)
        {
            return null;
        }

        prompt();
        while (await lines.WaitToReadAsync(cancellation))
        {
            if (lines.TryRead(out string? line) && line.Trim() is { Length: > 0 } serial)
            {
                taken++;
                return serial;
            }
        }

        return null;
    }
}
