using ImpedanceScreen.Screening.Serials;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>Where serial numbers come from, and what is known of the first boards.</summary>
/// <param name="Source">The source.</param>
/// <param name="BoardInNest">Serial number of a board that lies in the nest, where a person has read it.</param>
/// <param name="Boards">How many boards there will be; null where not known.</param>
/// <param name="Listed">The serial numbers in the order of the boards; empty where they are read off the
/// boards.</param>
internal sealed record SerialChoice(ISerialSource Source, string? BoardInNest, int? Boards, IReadOnlyList<string> Listed);
