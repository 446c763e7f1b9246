using ImpedanceScreen.Timing;

namespace ImpedanceScreen.SimulatedBench.Relays;

/// <summary>The communication watchdog of one relay unit: after its stated silence the unit drops all coils.</summary>
internal sealed class Watchdog(BenchModel model, SimulatedUnit unit, TimeSpan silence)
{
    private static readonly TimeSpan Slack = TimeSpan.FromMilliseconds(1);

    private Deadline expiry = Deadline.In(model.Clock.Time, silence);

    /// <summary>A request came: the silence begins anew. One that comes too late finds the coils dropped.</summary>
    public void Feed()
    {
        if (expiry.Passed)
        {
            unit.DropAll();
        }

        expiry = Deadline.In(model.Clock.Time, silence);
    }

    public async Task RunAsync(CancellationToken cancellation)
    {
        while (true)
        {
            Deadline next;
            lock (model.Gate)
            {
                if (expiry.Passed)
                {
                    unit.DropAll();
                    expiry = Deadline.In(model.Clock.Time, silence);
                }

                next = expiry;
            }

            // Not to the fraction of a millisecond: a silence may last a little longer, and the processor rests.
            await Task.Delay(next.Remaining + Slack, model.Clock.Time, cancellation);
        }
    }
}
