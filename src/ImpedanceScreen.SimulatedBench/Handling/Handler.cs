using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench.Logging;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.SimulatedBench.Handling;

/// <summary>
/// Puts boards into the nest and takes them away by the bin coils. A board stays until <c>done</c> is on, however long
/// that takes. Where the fixture has no handshake a person does it, told by <see cref="Replace"/>.
/// </summary>
internal sealed class Handler(
    BenchModel model, FixtureFile fixture, BoardFactory factory, Surroundings surroundings, long? boards,
    TruthFile? truth)
{
    private bool replaceAsked;

    /// <summary>Presents boards until they are exhausted.</summary>
    public async Task RunAsync(CancellationToken cancellation)
    {
        for (long ordinal = 1; boards is null || ordinal <= boards; ordinal++)
        {
            await HandleAsync(cancellation);
            Present(ordinal);
            await (fixture.Handshake is { } handshake
                ? ServeAsync(handshake, cancellation)
                : model.Changed.UntilAsync(() => model.Board is null && replaceAsked, cancellation));
            replaceAsked = false;
        }
    }

    /// <summary>A hand takes the board out of the nest.</summary>
    public void Lift() => Lift("none");

    /// <summary>A hand takes the board away, and the next may come.</summary>
    public void Replace()
    {
        replaceAsked = true;
        Lift();
        model.Changed.Raise();
    }

    private async Task ServeAsync(Handshake handshake, CancellationToken cancellation)
    {
        await model.Changed.UntilAsync(() => model.Board is null || model.IsOn(handshake.Done), cancellation);
        if (model.Board is not null)
        {
            string bin = Bin(handshake);
            await HandleAsync(cancellation);
            Lift(bin);
        }

        await model.Changed.UntilAsync(
            () => !model.IsOn(handshake.Done) && !model.IsOn(handshake.Busy), cancellation);
    }

    private void Present(long ordinal)
    {
        SimulatedBoard board = factory.Make(ordinal);
        truth?.Add(board);
        if (ordinal == 1)
        {
            // Before the board is told of: who then opens the guard must find it closed.
            model.SetInterlock(closed: true);
        }

        model.Log.Add(new BoardPresented(ordinal, board.Label));
        model.SetBoard(board);
    }

    private void Lift(string bin)
    {
        if (model.Board is { } board)
        {
            model.SetBoard(null);
            model.Log.Add(new BoardLifted(board.Ordinal, board.Label, bin));
        }
    }

    // Without any bin coil, and where coils contradict one another, a board goes to the retest bin.
    private string Bin(Handshake handshake) => (model.IsOn(handshake.PassBin), model.IsOn(handshake.FailBin)) switch
    {
        (true, false) => "pass",
        (false, true) => "fail",
        _ => "retest",
    };

    private Task HandleAsync(CancellationToken cancellation) =>
        Task.Delay(model.Clock.Real(surroundings.HandlerTime), model.Clock.Time, cancellation);
}
