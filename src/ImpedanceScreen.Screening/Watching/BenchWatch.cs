using ImpedanceScreen.Bench;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Screening.Watching;

/// <summary>
/// Every wait of an attempt goes through here: beside it the inputs are read at the declared interval, and a broken
/// interlock or a lifted board ends the wait at once. Not for use from two callers at a time.
/// </summary>
public sealed class BenchWatch
{
    private readonly IBench bench;
    private readonly TimeSpan interval;
    private readonly TimeProvider time;
    private Deadline nextPoll;
    private TimeSpan lastExchange;

    /// <summary>Watches a bench.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="interval">Longest time between two readings of the inputs.</param>
    /// <param name="time">Clock of the waits.</param>
    public BenchWatch(IBench bench, TimeSpan interval, TimeProvider time)
    {
        this.bench = bench;
        this.interval = interval;
        this.time = time;
        nextPoll = Deadline.In(time, TimeSpan.Zero);
    }

    /// <summary>Reads the inputs now.</summary>
    /// <exception cref="AttemptAbandonedException">The interlock is open or the board is gone.</exception>
    public async Task PollAsync(CancellationToken cancellation)
    {
        long start = time.GetTimestamp();
        InputState inputs = await bench.PollInputsAsync(cancellation);
        nextPoll = Deadline.After(time, start, interval);
        lastExchange = time.GetElapsedTime(start);
        if (!inputs.InterlockClosed)
        {
            throw new AttemptAbandonedException(AbandonReason.InterlockBroken);
        }

        if (!inputs.BoardPresent)
        {
            throw new AttemptAbandonedException(AbandonReason.BoardLifted);
        }
    }

    /// <summary>Reads the inputs if it is time to.</summary>
    public Task PollIfDueAsync(CancellationToken cancellation) =>
        nextPoll.Passed ? PollAsync(cancellation) : Task.CompletedTask;

    /// <summary>Waits for a deadline, reading the inputs beside it.</summary>
    public async Task UntilAsync(Deadline deadline, CancellationToken cancellation)
    {
        while (!deadline.Passed)
        {
            TimeSpan left = deadline.Remaining;
            TimeSpan toPoll = nextPoll.Remaining;
            if (toPoll + lastExchange < left)
            {
                await nextPoll.WaitAsync(cancellation);
                await PollAsync(cancellation);
            }
            else if (toPoll < left && lastExchange < left)
            {
                // The exchange would run past the deadline if it began when due: begin it now instead.
                await PollAsync(cancellation);
            }
            else
            {
                await deadline.WaitAsync(cancellation);
            }
        }
    }

    /// <summary>Runs an operation on another link, reading the inputs beside it.</summary>
    public Task<T> BesideAsync<T>(Func<CancellationToken, Task<T>> operation, CancellationToken cancellation) =>
        BesideAsync(operation, _ => Task.CompletedTask, cancellation);

    /// <summary>
    /// Runs an operation on another link; beside it, relay work first, then reading the inputs. A broken interlock
    /// cancels the operation and
    /// is reported without waiting for it to unwind.
    /// </summary>
    public async Task<T> BesideAsync<T>(
        Func<CancellationToken, Task<T>> operation, Func<Task, Task> relayWork, CancellationToken cancellation)
    {
        ArgumentNullException.ThrowIfNull(operation);
        ArgumentNullException.ThrowIfNull(relayWork);
        using var abandoned = CancellationTokenSource.CreateLinkedTokenSource(cancellation);
        Task<T> running = operation(abandoned.Token);
        try
        {
            await relayWork(running);
            while (!running.IsCompleted)
            {
                using var pause = CancellationTokenSource.CreateLinkedTokenSource(cancellation);
                Task due = Task.Delay(nextPoll.Remaining, time, pause.Token);
                await Task.WhenAny(running, due);
                pause.Cancel();
                if (!running.IsCompleted)
                {
                    await PollAsync(cancellation);
                }
            }
        }
        catch
        {
            // Here and now: opening the relays must not wait for a free thread.
            abandoned.Cancel();
            _ = running.ContinueWith(
                static ended => ended.Exception, CancellationToken.None, TaskContinuationOptions.OnlyOnFaulted,
                TaskScheduler.Default);
            throw;
        }

        return await running;
    }
}
