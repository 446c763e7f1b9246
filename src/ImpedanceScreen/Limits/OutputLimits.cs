namespace ImpedanceScreen.Limits;

/// <summary>One output of a product.</summary>
/// <param name="Name">The output's name, the same in the fixture file.</param>
/// <param name="States">Its drive states, in the order in which they are screened; at least one.</param>
public sealed record OutputLimits(string Name, IReadOnlyList<DriveState> States);
