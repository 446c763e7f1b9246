using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>Sort, busy and done coils. Only this class writes them, one by one, and only those that differ.</summary>
internal sealed class HandshakeCoils(Handshake handshake, IReadOnlyDictionary<string, FixtureUnit> units)
{
    public async Task<HandshakeState> ReadAsync(CancellationToken cancellation) =>
        Interpret(await ReadCoilsAsync(cancellation));

    /// <summary>
    /// Sets the coils in an order that shows no false state on the way: done goes off before a bin changes, and on only
    /// after the
    /// bin was read back.
    /// </summary>
    public async Task SetAsync(HandshakeState wanted, CancellationToken cancellation)
    {
        HandshakeState state = wanted is { Bin: SortBin.Retest } && handshake.RetestBin is null
            ? wanted with { Bin = SortBin.None }
            : wanted;
        Dictionary<Relay, bool> now = await ReadCoilsAsync(cancellation);
        bool binStays = Bins().All(pair => now[pair.Relay] == (pair.Bin == state.Bin));
        await SetAsync(now, handshake.Done, now[handshake.Done] && state.Done && binStays, cancellation);
        foreach ((Relay relay, SortBin bin) in Bins().Where(pair => pair.Bin != state.Bin))
        {
            await SetAsync(now, relay, value: false, cancellation);
        }

        foreach ((Relay relay, SortBin _) in Bins().Where(pair => pair.Bin == state.Bin))
        {
            await SetAsync(now, relay, value: true, cancellation);
        }

        await SetAsync(now, handshake.Busy, state.Busy, cancellation);
        if (state.Done && !now[handshake.Done])
        {
            await ConfirmAsync(state with { Done = false }, cancellation);
            await SetAsync(now, handshake.Done, value: true, cancellation);
        }

        await ConfirmAsync(state, cancellation);
    }

    /// <summary>
    /// Reads the coils where a watchdog needs word, so that it does not drop them while a handler is waited for.
    /// </summary>
    public async Task KeepAliveAsync(CancellationToken cancellation)
    {
        if (Relays().Any(relay => units[relay.Unit].NeedsWord))
        {
            await ReadCoilsAsync(cancellation);
        }
    }

    private IEnumerable<Relay> Relays() =>
        Bins().Select(pair => pair.Relay).Append(handshake.Busy).Append(handshake.Done);

    private IEnumerable<(Relay Relay, SortBin Bin)> Bins()
    {
        yield return (handshake.PassBin, SortBin.Pass);
        yield return (handshake.FailBin, SortBin.Fail);
        if (handshake.RetestBin is { } retest)
        {
            yield return (retest, SortBin.Retest);
        }
    }

    private HandshakeState Interpret(Dictionary<Relay, bool> coils)
    {
        SortBin[] on = [.. Bins().Where(pair => coils[pair.Relay]).Select(pair => pair.Bin)];
        return on.Length <= 1
            ? new HandshakeState(on.FirstOrDefault(), coils[handshake.Busy], coils[handshake.Done])
            : throw new BenchFaultException(
                BenchFault.CoilNotConfirmed,
                $"Several bin coils are on at once ({string.Join(", ", on)}). "
                + "Look at the relay unit and at the handler.");
    }

    private async Task<Dictionary<Relay, bool>> ReadCoilsAsync(CancellationToken cancellation)
    {
        Dictionary<Relay, bool> coils = [];
        foreach (IGrouping<string, Relay> ofUnit in Relays().GroupBy(relay => relay.Unit))
        {
            IReadOnlyDictionary<ushort, bool> values =
                await units[ofUnit.Key].ReadCoilsAsync(
                    ofUnit.Select(relay => relay.Coil), FixtureUnit.NothingBetween, cancellation);
            foreach (Relay relay in ofUnit)
            {
                coils[relay] = values[relay.Coil];
            }
        }

        return coils;
    }

    private async Task SetAsync(Dictionary<Relay, bool> now, Relay relay, bool value, CancellationToken cancellation)
    {
        if (now[relay] != value)
        {
            await units[relay.Unit].WriteCoilsAsync(relay.Coil, [value], cancellation);
            now[relay] = value;
        }
    }

    private async Task ConfirmAsync(HandshakeState state, CancellationToken cancellation)
    {
        HandshakeState read = await ReadAsync(cancellation);
        if (read != state)
        {
            throw new BenchFaultException(
                BenchFault.CoilNotConfirmed,
                $"The handshake coils read {read} where {state} was commanded. Look at the relay unit of the handler.");
        }
    }
}
