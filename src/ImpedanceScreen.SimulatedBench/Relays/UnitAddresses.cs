using System.Runtime.InteropServices;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.SimulatedBench.Relays;

/// <summary>How many addresses of each kind a fixture file uses on a unit, counted from 0.</summary>
/// <param name="Coils">Coils.</param>
/// <param name="Inputs">Discrete inputs.</param>
/// <param name="InputRegisters">Input registers.</param>
[StructLayout(LayoutKind.Auto)]
internal readonly record struct UnitAddresses(int Coils, int Inputs, int InputRegisters)
{
    public static UnitAddresses Of(FixtureFile fixture, string unit)
    {
        List<Relay> relays = [.. FixtureRelays.Switching(fixture).Concat(FixtureRelays.Handshaking(fixture))
            .Where(relay => relay.Unit == unit)];
        IEnumerable<int> inputs = relays.Select(relay => relay.ContactInput is { } input ? input + 1 : 0)
            .Concat(Points(fixture.Inputs).Where(point => point.Unit == unit).Select(point => point.Address + 1));
        TemperatureSensor? sensor = fixture.TemperatureSensor;
        return new UnitAddresses(
            relays.Select(relay => relay.Coil + 1).DefaultIfEmpty().Max(),
            inputs.DefaultIfEmpty().Max(),
            sensor?.Unit == unit ? sensor.Register + 1 : 0);
    }

    private static InputPoint[] Points(BenchInputs inputs) =>
        inputs.BoardPresent is { } present ? [present, inputs.Interlock] : [inputs.Interlock];
}
