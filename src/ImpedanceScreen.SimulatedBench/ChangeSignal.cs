namespace ImpedanceScreen.SimulatedBench;

/// <summary>Wakes those who wait for a condition whenever something changed that it may depend on.</summary>
internal sealed class ChangeSignal
{
    private TaskCompletionSource changed = Fresh();

    /// <summary>Something changed.</summary>
    public void Raise() => Interlocked.Exchange(ref changed, Fresh()).TrySetResult();

    /// <summary>Waits until a condition holds.</summary>
    public async Task UntilAsync(Func<bool> holds, CancellationToken cancellation)
    {
        while (true)
        {
            // Taken before the condition is looked at: a change in between ends the wait at once.
            Task next = Volatile.Read(ref changed).Task;
            if (holds())
            {
                return;
            }

            await next.WaitAsync(cancellation);
        }
    }

    private static TaskCompletionSource Fresh() => new(TaskCreationOptions.RunContinuationsAsynchronously);
}
