using System.Collections.Concurrent;
using Microsoft.Extensions.Time.Testing;

namespace ImpedanceScreen.Tests.Screening;

/// <summary>
/// Runs work on one thread and lets a fake clock go on only when nothing is left to do: the same every time.
/// </summary>
internal static class FakeTime
{
    private const int StepsMax = 2_000_000;
    private static readonly TimeSpan Step = TimeSpan.FromMilliseconds(0.5);

    public static T Run<T>(FakeTimeProvider time, Func<Task<T>> work)
    {
        SynchronizationContext? before = SynchronizationContext.Current;
        var queue = new WorkQueue();
        SynchronizationContext.SetSynchronizationContext(queue);
        try
        {
            Task<T> task = work();
            for (int step = 0; !task.IsCompleted; step++)
            {
                Assert.True(step < StepsMax, "the work waits for something that time does not bring");
                if (!queue.RunAll())
                {
                    time.Advance(Step);
                }
            }

            return task.GetAwaiter().GetResult();
        }
        finally
        {
            SynchronizationContext.SetSynchronizationContext(before);
        }
    }

    private sealed class WorkQueue : SynchronizationContext
    {
        private readonly ConcurrentQueue<(SendOrPostCallback Work, object? State)> waiting = new();

        public override void Post(SendOrPostCallback d, object? state) => waiting.Enqueue((d, state));

        public bool RunAll()
        {
            bool any = false;
            while (waiting.TryDequeue(out (SendOrPostCallback Work, object? State) next))
            {
                next.Work(next.State);
                any = true;
            }

            return any;
        }
    }
}
