using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>
/// Lets bytes take the time that they take on a serial line. Where there is no line (a socket) they take none.
/// </summary>
internal sealed class LinePace(BenchModel model, Link link)
{
    private readonly SerialLink? line = link as SerialLink;

    /// <summary>What one byte takes.</summary>
    public TimeSpan CharacterTime => line?.CharacterTime ?? TimeSpan.Zero;

    /// <summary>A stamp for the first byte of a request.</summary>
    public long Now => model.Clock.Now;

    /// <summary>Waits until bytes that began at a stamp are through, and so much longer.</summary>
    public Task PassAsync(long startedTimestamp, int bytes, TimeSpan longer, CancellationToken cancellation) =>
        line is null
            ? Task.CompletedTask
            : Deadline.After(model.Clock.Time, startedTimestamp, (bytes * CharacterTime) + longer).WaitAsync(cancellation);

    /// <summary>Notes an exchange.</summary>
    public void Note(int bytesIn, int bytesOut)
    {
        if (line is not null)
        {
            model.Log.Add(new LineUsed(line.Name, bytesIn, bytesOut, CharacterTime.TotalMilliseconds));
        }
    }
}
