using System.Text.Encodings.Web;
using System.Text.Json;

namespace ImpedanceScreen.SimulatedBench.Logging;

/// <summary>
/// What happened, in order: kept for callers in the same process and written as JSON lines, flushed one by one, so
/// that it judges a program that was killed.
/// </summary>
/// <param name="clock">The bench's clock.</param>
/// <param name="writer">Where the lines go; null for nowhere.</param>
/// <remarks>Safe to use from any thread.</remarks>
public sealed class BenchLog(BenchClock clock, TextWriter? writer)
{
    // An endless lot must not fill the memory; the file has everything.
    private const int KeptMost = 200_000;

    private readonly Lock gate = new();
    private readonly Queue<BenchEvent> kept = new();

    /// <summary>How bench files spell JSON.</summary>
    public static JsonSerializerOptions Json { get; } = new()
    {
        PropertyNamingPolicy = JsonNamingPolicy.SnakeCaseLower, Encoder = JavaScriptEncoder.UnsafeRelaxedJsonEscaping,
    };

    /// <summary>The latest events, oldest first.</summary>
    public IReadOnlyList<BenchEvent> Events
    {
        get
        {
            lock (gate)
            {
                return [.. kept];
            }
        }
    }

    /// <summary>Adds an event at the present time.</summary>
    public void Add(BenchEvent happened)
    {
        ArgumentNullException.ThrowIfNull(happened);
        lock (gate)
        {
            BenchEvent stamped = happened with { Ms = clock.Milliseconds(clock.Now), Utc = clock.Utc };
            kept.Enqueue(stamped);
            if (kept.Count > KeptMost)
            {
                kept.Dequeue();
            }

            writer?.WriteLine(JsonSerializer.Serialize(stamped, Json));
            writer?.Flush();
        }
    }
}
