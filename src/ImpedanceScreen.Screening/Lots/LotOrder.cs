using ImpedanceScreen.Jobs;
using ImpedanceScreen.Screening.Serials;

namespace ImpedanceScreen.Screening.Lots;

/// <summary>What is to be screened.</summary>
/// <param name="Job">The product on the fixture.</param>
/// <param name="Lot">Lot name; null for boards outside any lot, which are not closed.</param>
/// <param name="Operator">Operator; null where not stated.</param>
/// <param name="Serials">Where serial numbers come from.</param>
/// <param name="BoardInNest">Serial number of a board that lies in the nest from before, where a person has read
/// it.</param>
/// <param name="ClosesLot">Whether the lot is closed when the serial numbers end: not for a single board.</param>
public sealed record LotOrder(
    ScreeningJob Job, string? Lot, string? Operator, ISerialSource Serials, string? BoardInNest, bool ClosesLot);
