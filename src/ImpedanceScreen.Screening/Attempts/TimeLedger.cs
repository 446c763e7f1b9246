using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>Adds up where the time of an attempt goes.</summary>
internal sealed class TimeLedger
{
    private readonly TimeProvider time;
    private readonly long begun;
    private TimeSpan switching;
    private TimeSpan settling;
    private TimeSpan integrating;
    private TimeSpan talking;

    public TimeLedger(TimeProvider time)
    {
        this.time = time;
        begun = time.GetTimestamp();
    }

    /// <summary>Whole milliseconds since the attempt began.</summary>
    public int ElapsedMs => (int)time.GetElapsedTime(begun).TotalMilliseconds;

    public async Task<T> SwitchingAsync<T>(Task<T> work)
    {
        long start = time.GetTimestamp();
        T result = await work;
        switching += time.GetElapsedTime(start);
        return result;
    }

    public async Task SettlingAsync(Task work, TimeSpan contactTime)
    {
        long start = time.GetTimestamp();
        await work;
        TimeSpan spent = time.GetElapsedTime(start);
        TimeSpan atContacts = spent < contactTime ? spent : contactTime;
        switching += atContacts;
        settling += spent - atContacts;
    }

    public async Task<T> ReadingAsync<T>(Task<T> work, TimeSpan integration)
    {
        long start = time.GetTimestamp();
        T result = await work;
        TimeSpan spent = time.GetElapsedTime(start);
        TimeSpan atMeter = spent < integration ? spent : integration;
        integrating += atMeter;
        talking += spent - atMeter;
        return result;
    }

    public TimeSpent Close()
    {
        int total = ElapsedMs;
        int a = (int)switching.TotalMilliseconds;
        int b = (int)settling.TotalMilliseconds;
        int c = (int)integrating.TotalMilliseconds;
        int d = (int)talking.TotalMilliseconds;
        return new TimeSpent(a, b, c, d, Math.Max(0, total - a - b - c - d));
    }
}
