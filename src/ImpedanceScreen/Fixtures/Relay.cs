namespace ImpedanceScreen.Fixtures;

/// <summary>One relay: a coil of a relay unit and, where wired, the input that reads its mirror contact.</summary>
/// <param name="Unit">Name of its relay unit.</param>
/// <param name="Coil">Coil address, 0 to 65535 as on the wire.</param>
/// <param name="ContactInput">Discrete input address on the same unit that reads 1 while the contact is closed; null
/// where not wired.</param>
public sealed record Relay(string Unit, ushort Coil, ushort? ContactInput);

/// <summary>A discrete input of a relay unit.</summary>
/// <param name="Unit">Name of its relay unit.</param>
/// <param name="Address">Discrete input address, 0 to 65535 as on the wire.</param>
public sealed record InputPoint(string Unit, ushort Address);
