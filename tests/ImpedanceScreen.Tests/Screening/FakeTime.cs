using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Screening;

/// <summary>Lets a fake clock run until a task has ended.</summary>
internal static class FakeTime
{
    private const int StepsMax = 2_000_000;

    public static async Task<T> RunAsync<T>(FakeTimeProvider time, Task<T> task)
    {
        for (int step = 0; !task.IsCompleted; step++)
        {
            Assert.True(step < StepsMax, "the task waits for something that time does not bring");
            time.Advance(TimeSpan.FromMilliseconds(0.5));
            await Task.Yield();
        }

        return await task;
    }
}
