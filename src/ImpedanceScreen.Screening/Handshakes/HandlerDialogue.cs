using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Screening.Handshakes;

/// <summary>
/// The dialogue with whatever puts boards into the nest: present up, busy up, (attempt), bin, done up, present down,
/// bin and done cleared, busy down. Without handshake coils a person does it and only board-present is waited for.
/// </summary>
public sealed class HandlerDialogue(IBench bench, FixtureFile fixture, TimeProvider time)
{
    private bool HasCoils => fixture.Handshake is not null;

    /// <summary>Waits until a board is present and the interlock closed.</summary>
    public Task AwaitBoardAsync(CancellationToken cancellation) =>
        AwaitAsync(inputs => inputs is { BoardPresent: true, InterlockClosed: true }, cancellation);

    /// <summary>Waits until no board is present; at once where no such input is wired.</summary>
    public Task AwaitNoBoardAsync(CancellationToken cancellation) =>
        fixture.Inputs.BoardPresent is null
            ? Task.CompletedTask
            : AwaitAsync(inputs => !inputs.BoardPresent, cancellation);

    /// <summary>Busy up; bins and done are off.</summary>
    public Task BeginAsync(CancellationToken cancellation) => SetAsync(SortBin.None, busy: true, done: false, cancellation);

    /// <summary>
    /// Sets the bin, reads it back, then done. Only for a board whose record is durable. An aborted attempt goes to
    /// the retest bin.
    /// </summary>
    public async Task SortAsync(Disposition disposition, CancellationToken cancellation)
    {
        SortBin bin = disposition switch
        {
            Disposition.Pass => SortBin.Pass,
            Disposition.Fail => SortBin.Fail,
            _ => SortBin.Retest,
        };
        await SetAsync(bin, busy: true, done: false, cancellation);
        await SetAsync(bin, busy: true, done: true, cancellation);
    }

    /// <summary>Bin and done off, then busy off. Only when the board is gone.</summary>
    public async Task EndAsync(CancellationToken cancellation)
    {
        await SetAsync(SortBin.None, busy: true, done: false, cancellation);
        await SetAsync(SortBin.None, busy: false, done: false, cancellation);
    }

    private Task SetAsync(SortBin bin, bool busy, bool done, CancellationToken cancellation) =>
        HasCoils ? bench.SetHandshakeAsync(new HandshakeState(bin, busy, done), cancellation) : Task.CompletedTask;

    private async Task AwaitAsync(Func<InputState, bool> come, CancellationToken cancellation)
    {
        while (true)
        {
            Deadline next = Deadline.In(time, fixture.Inputs.Poll);
            if (come(await bench.PollInputsAsync(cancellation)))
            {
                return;
            }

            await next.WaitAsync(cancellation);
        }
    }
}
