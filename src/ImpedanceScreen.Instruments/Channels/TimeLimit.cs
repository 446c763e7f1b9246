namespace ImpedanceScreen.Instruments.Channels;

/// <summary>
/// One deadline for a whole exchange, handed down as a token. Tells its own expiry from the caller's cancellation,
/// whatever
/// exception the layer below makes of it.
/// </summary>
internal sealed class TimeLimit : IDisposable
{
    private readonly CancellationTokenSource timer;
    private readonly CancellationTokenSource? either;
    private readonly CancellationToken caller;

    public TimeLimit(TimeProvider time, TimeSpan span, CancellationToken caller)
    {
        this.caller = caller;
        timer = new CancellationTokenSource(span, time);
        either = caller.CanBeCanceled ? CancellationTokenSource.CreateLinkedTokenSource(timer.Token, caller) : null;
    }

    public CancellationToken Token => (either ?? timer).Token;

    /// <summary>Whether the time is up and the caller did not cancel.</summary>
    public bool Expired => timer.IsCancellationRequested && !caller.IsCancellationRequested;

    public void Dispose()
    {
        either?.Dispose();
        timer.Dispose();
    }
}
