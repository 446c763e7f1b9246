using ImpedanceScreen.Instruments.Modbus;
using ImpedanceScreen.SimulatedBench.Relays;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>The relay units on one link.</summary>
internal sealed class UnitGroup(BenchModel model, string link)
{
    private readonly Dictionary<byte, SimulatedUnit> units = model.Units
        .Where(unit => unit.Unit.Link == link)
        .ToDictionary(unit => unit.Unit.UnitAddress);

    /// <summary>Answers a request.</summary>
    /// <returns>Length of the answer; 0 where the link has no such unit.</returns>
    public int Answer(byte address, ReadOnlySpan<byte> request, Span<byte> answer)
    {
        if (!units.TryGetValue(address, out SimulatedUnit? unit))
        {
            return 0;
        }

        try
        {
            return model.Answer(unit, request, answer);
        }
        catch (ModbusRefusalException refusal)
        {
            return refusal.Write(answer);
        }
    }
}
