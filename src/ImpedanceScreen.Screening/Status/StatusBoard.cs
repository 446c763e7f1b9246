using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Status;

/// <summary>The one place where the bench's status is published. Written by the bench loop, read by anybody.</summary>
public sealed class StatusBoard
{
    private readonly TimeProvider time;
    private BenchStatus current;

    /// <summary>Starts with <see cref="Activity.Starting"/>.</summary>
    public StatusBoard(TimeProvider time)
    {
        ArgumentNullException.ThrowIfNull(time);
        this.time = time;
        current = new BenchStatus(Activity.Starting, null, null, "opening links", 0, null, 0, 0, 0, 0, time.GetUtcNow());
    }

    /// <summary>The status now.</summary>
    public BenchStatus Current => Volatile.Read(ref current);

    /// <summary>Raised on the bench loop's thread after an attempt has its record: what a handler takes, the loop waits.</summary>
    public event Action<BoardRecord>? Recorded;

    /// <summary>Publishes what is being done.</summary>
    public void Publish(Activity activity, string doing, string? serial = null, double boardFraction = 0) =>
        Replace(Current with
        {
            Activity = activity, Doing = doing, Serial = serial, BoardFraction = boardFraction, At = time.GetUtcNow(),
        });

    /// <summary>Publishes which lot is worked and how many boards it has.</summary>
    public void PublishLot(string? lot, int? planned) =>
        Replace(Current with { Lot = lot, Planned = planned, At = time.GetUtcNow() });

    /// <summary>Counts an attempt that has its record.</summary>
    public void Count(BoardRecord record)
    {
        ArgumentNullException.ThrowIfNull(record);
        BenchStatus now = Current;
        Replace(record.Disposition switch
        {
            Disposition.Pass => now with { Passed = now.Passed + 1 },
            Disposition.Fail => now with { Failed = now.Failed + 1 },
            Disposition.Retest => now with { Retest = now.Retest + 1 },
            _ => now with { Aborted = now.Aborted + 1 },
        });
        Recorded?.Invoke(record);
    }

    private void Replace(BenchStatus status) => Volatile.Write(ref current, status);
}
