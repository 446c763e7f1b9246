using System.Threading.Channels;

namespace ImpedanceScreen.Records.Storing;

/// <summary>
/// One thread that works off what it is given, in order: SQLite's calls block, and a store has one writer. Bounded: a
/// caller waits where the disk is slower than the bench.
/// </summary>
internal sealed class WriterThread : IAsyncDisposable
{
    private const int QueueLength = 64;

    private readonly Channel<Action> queue = Channel.CreateBounded<Action>(QueueLength);
    private readonly TaskCompletionSource ended = new(TaskCreationOptions.RunContinuationsAsynchronously);

    public WriterThread(string name) =>
        new Thread(WorkOff) { Name = name, IsBackground = true }.Start();

    /// <summary>Runs a job on the thread; its exception is the task's.</summary>
    public async Task<T> RunAsync<T>(Func<T> job)
    {
        var done = new TaskCompletionSource<T>(TaskCreationOptions.RunContinuationsAsynchronously);
        await queue.Writer.WriteAsync(() =>
        {
            try
            {
                done.SetResult(job());
            }
            catch (Exception exception)
            {
                // The caller gets it; the thread lives on.
                done.SetException(exception);
            }
        });
        return await done.Task;
    }

    /// <summary>Works off what is queued and ends the thread.</summary>
    public async ValueTask DisposeAsync()
    {
        queue.Writer.TryComplete();
        await ended.Task;
    }

    private void WorkOff()
    {
        while (queue.Reader.WaitToReadAsync().AsTask().GetAwaiter().GetResult())
        {
            while (queue.Reader.TryRead(out Action? job))
            {
                job();
            }
        }

        ended.SetResult();
    }
}
