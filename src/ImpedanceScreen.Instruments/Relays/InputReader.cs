using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>Board-present and interlock; one exchange where both are on one unit.</summary>
internal sealed class InputReader(BenchInputs inputs, IReadOnlyDictionary<string, FixtureUnit> units)
{
    public async Task<InputState> ReadAsync(CancellationToken cancellation)
    {
        FixtureUnit interlockUnit = units[inputs.Interlock.Unit];
        if (inputs.BoardPresent is not { } present)
        {
            return new(BoardPresent: true, await ReadAsync(inputs.Interlock, cancellation));
        }

        if (present.Unit != inputs.Interlock.Unit)
        {
            bool closed = await ReadAsync(inputs.Interlock, cancellation);
            return new(await ReadAsync(present, cancellation), closed);
        }

        IReadOnlyDictionary<ushort, bool> both =
            await interlockUnit.ReadInputsAsync(
                [present.Address, inputs.Interlock.Address], FixtureUnit.NothingBetween, cancellation);
        return new(both[present.Address], both[inputs.Interlock.Address]);
    }

    private async Task<bool> ReadAsync(InputPoint input, CancellationToken cancellation) =>
        (await units[input.Unit].ReadInputsAsync(
            [input.Address], FixtureUnit.NothingBetween, cancellation))[input.Address];
}
