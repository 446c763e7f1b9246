using System.Runtime.InteropServices;

namespace ImpedanceScreen.Timing;

/// <summary>
/// A moment on the caller's monotonic clock. Waits are made against a moment, never summed from delays, so that what
/// is done meanwhile costs nothing.
/// </summary>
[StructLayout(LayoutKind.Auto)]
public readonly record struct Deadline
{
    // A timer overshoots by a fraction of a millisecond up to a few; the last stretch is spent yielding instead.
    private static readonly TimeSpan LastStretch = TimeSpan.FromMilliseconds(1.5);

    private readonly TimeProvider time;
    private readonly long timestamp;

    private Deadline(TimeProvider time, long timestamp)
    {
        this.time = time;
        this.timestamp = timestamp;
    }

    /// <summary>The moment that lies <paramref name="span"/> after a timestamp of the time provider.</summary>
    public static Deadline After(TimeProvider time, long timestamp, TimeSpan span)
    {
        ArgumentNullException.ThrowIfNull(time);
        return new(time, timestamp + (long)Math.Ceiling(span.TotalSeconds * time.TimestampFrequency));
    }

    /// <summary>The moment that lies <paramref name="span"/> from now.</summary>
    public static Deadline In(TimeProvider time, TimeSpan span)
    {
        ArgumentNullException.ThrowIfNull(time);
        return After(time, time.GetTimestamp(), span);
    }

    /// <summary>Time left, never negative.</summary>
    public TimeSpan Remaining
    {
        get
        {
            long now = time.GetTimestamp();
            return now >= timestamp ? TimeSpan.Zero : time.GetElapsedTime(now, timestamp);
        }
    }

    /// <summary>Whether the moment has come.</summary>
    public bool Passed => time.GetTimestamp() >= timestamp;

    /// <summary>Waits until the moment has come: at once where it has.</summary>
    /// <exception cref="OperationCanceledException">The caller cancelled.</exception>
    public async Task WaitAsync(CancellationToken cancellation)
    {
        // Only the real clock goes on by itself while this thread yields; a test's clock is waited for by its timer.
        bool real = ReferenceEquals(time, TimeProvider.System);
        while (Remaining is { Ticks: > 0 } left)
        {
            if (!real)
            {
                // A delay drops fractions of a millisecond: less than one would not wait at all, for ever.
                await Task.Delay(TimeSpan.FromMilliseconds(Math.Ceiling(left.TotalMilliseconds)), time, cancellation);
            }
            else if (left > LastStretch)
            {
                await Task.Delay(left - LastStretch, time, cancellation);
            }
            else
            {
                cancellation.ThrowIfCancellationRequested();
                Thread.Yield();
            }
        }
    }
}
