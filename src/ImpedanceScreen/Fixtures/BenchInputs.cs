namespace ImpedanceScreen.Fixtures;

/// <summary>Discrete inputs of the bench.</summary>
/// <param name="BoardPresent">1 while a board is in the nest; null where a person says so.</param>
/// <param name="Interlock">1 while the guard is closed and the emergency stop is not pressed.</param>
/// <param name="Poll">Interval at which every wait reads them.</param>
public sealed record BenchInputs(InputPoint? BoardPresent, InputPoint Interlock, TimeSpan Poll);

/// <summary>A temperature sensor read over Modbus (function 04).</summary>
/// <param name="Unit">Name of its relay unit.</param>
/// <param name="Register">Input register address as on the wire.</param>
/// <param name="DegCPerCount">Temperature of one count, °C; the register is signed.</param>
/// <param name="StandardUncertaintyDegC">Standard uncertainty, °C.</param>
public sealed record TemperatureSensor(string Unit, ushort Register, double DegCPerCount, double StandardUncertaintyDegC);

/// <summary>What the bench tells a handler.</summary>
/// <param name="PassBin">Coil of the pass bin: a board goes there only while it is energised.</param>
/// <param name="FailBin">Coil of the fail bin.</param>
/// <param name="RetestBin">Coil of the retest bin; null where no coil means retest.</param>
/// <param name="Busy">On while a board is being screened.</param>
/// <param name="Done">On when the bin is valid.</param>
public sealed record Handshake(Relay PassBin, Relay FailBin, Relay? RetestBin, Relay Busy, Relay Done);
