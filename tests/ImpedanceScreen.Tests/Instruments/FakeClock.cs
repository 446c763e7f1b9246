using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>Drives fake time on while something waits for it.</summary>
internal static class FakeClock
{
    public static async Task<T> PumpAsync<T>(this FakeTimeProvider time, Task<T> task, double stepMs = 1)
    {
        await PumpAsync(time, (Task)task, stepMs);
        return await task;
    }

    public static async Task PumpAsync(this FakeTimeProvider time, Task task, double stepMs = 1)
    {
        while (!task.IsCompleted)
        {
            time.Advance(TimeSpan.FromMilliseconds(stepMs));
            await Task.Delay(1);
        }

        await task;
    }
}
