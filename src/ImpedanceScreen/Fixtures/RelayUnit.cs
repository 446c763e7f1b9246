namespace ImpedanceScreen.Fixtures;

/// <summary>One addressable Modbus device with relays and perhaps inputs.</summary>
/// <param name="Name">The unit's name in the file.</param>
/// <param name="Link">Name of its link.</param>
/// <param name="UnitAddress">Modbus unit address, 1 to 247.</param>
/// <param name="Operate">Longest time from the coil's acknowledgement to a closed contact at rest.</param>
/// <param name="Release">Longest time from the coil's acknowledgement to an open contact.</param>
/// <param name="LongestAnswer">Longest time the unit may take to answer; silence after a time-out lasts as
/// long.</param>
/// <param name="WatchdogSilence">The unit drops all its coils after this silence; null where it has no such
/// watchdog.</param>
public sealed record RelayUnit(
    string Name, string Link, byte UnitAddress, TimeSpan Operate, TimeSpan Release, TimeSpan LongestAnswer,
    TimeSpan? WatchdogSilence);
