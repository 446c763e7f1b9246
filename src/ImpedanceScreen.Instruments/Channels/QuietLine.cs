namespace ImpedanceScreen.Instruments.Channels;

/// <summary>Drains a serial line on which a late answer may still be coming in.</summary>
internal static class QuietLine
{
    // A serial adapter hands bytes over in bursts; a pause this long means that nothing more is under way.
    private static readonly TimeSpan BurstGap = TimeSpan.FromMilliseconds(20);

    // A line that babbles on is not waited for: the next exchange fails and says so.
    private const int DrainedMost = 4096;

    public static async Task DrainAsync(IByteChannel channel, TimeProvider time, CancellationToken cancellation)
    {
        channel.DiscardReceived();
        var dropped = new byte[256];
        for (int drained = 0; drained < DrainedMost;)
        {
            using var quiet = new TimeLimit(time, BurstGap, cancellation);
            try
            {
                drained += await channel.ReadAsync(dropped, quiet.Token);
            }
            catch (OperationCanceledException) when (quiet.Expired)
            {
                return;
            }
        }
    }
}
