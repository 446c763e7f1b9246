namespace ImpedanceScreen.Benchmarks.Replies;

/// <summary>
/// Many replies on a thread of their own, watched from outside: a parser that hangs would never come back.
/// </summary>
internal sealed class ReplyRun(int count, ulong seed)
{
    private static readonly TimeSpan Patience = TimeSpan.FromSeconds(20);

    private int done;
    private int answers;

    public int Done => Volatile.Read(ref done);

    public int Answers => answers;

    public int TypedErrors => Done - answers;

    /// <summary>What went wrong; null where nothing did.</summary>
    public string? Failure { get; private set; }

    public async Task RunAsync(CancellationToken cancellation)
    {
        Task work = Task.Factory.StartNew(
            Work, cancellation, TaskCreationOptions.LongRunning, TaskScheduler.Default);
        int seen = -1;
        while (!work.IsCompleted)
        {
            await Task.WhenAny(work, Task.Delay(Patience, cancellation));
            if (!work.IsCompleted && Done == seen)
            {
                Failure = $"Reply {seen} of seed {seed} hangs.";
                return;
            }

            seen = Done;
        }

        await work;
    }

    private void Work()
    {
        ReplyTrial trial = new(seed);
        for (; done < count; Interlocked.Increment(ref done))
        {
            try
            {
                answers += trial.RunAsync().GetAwaiter().GetResult() == ReplyOutcome.Answer ? 1 : 0;
            }
            catch (Exception e)
            {
                // Whatever is not typed is the finding; the run ends with it.
                Failure = $"Reply {done} of seed {seed}: {e}";
                return;
            }
        }
    }
}
