using ImpedanceScreen.Timing;

namespace ImpedanceScreen.SimulatedBench;

/// <summary>
/// The bench's clock. The physics runs on seconds that a time scale stretches; log, time-outs and lines run on real
/// ones.
/// </summary>
/// <param name="time">Clock.</param>
/// <param name="scale">Real seconds for one second of the physics, more than 0 and at most 1.</param>
public sealed class BenchClock(TimeProvider time, double scale)
{
    private readonly long start = time.GetTimestamp();

    /// <summary>The underlying clock.</summary>
    public TimeProvider Time => time;

    /// <summary>A timestamp of the underlying clock.</summary>
    public long Now => time.GetTimestamp();

    /// <summary>The time, UTC.</summary>
    public DateTimeOffset Utc => time.GetUtcNow();

    /// <summary>Real milliseconds from the bench's start to a timestamp.</summary>
    public double Milliseconds(long timestamp) => time.GetElapsedTime(start, timestamp).TotalMilliseconds;

    /// <summary>Seconds of the physics from the bench's start to a timestamp.</summary>
    public double PhysicsSeconds(long timestamp) => time.GetElapsedTime(start, timestamp).TotalSeconds / scale;

    /// <summary>What a span of the physics takes in real time.</summary>
    public TimeSpan Real(TimeSpan span) => span * scale;

    /// <summary>A real deadline after a span of the physics.</summary>
    public Deadline InPhysics(TimeSpan span) => Deadline.In(time, Real(span));
}
