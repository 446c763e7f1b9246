using ImpedanceScreen.Estimation;

namespace ImpedanceScreen.Station.Showing;

/// <summary>Short names of faults for tables; the full words stand in the record.</summary>
internal static class FaultNames
{
    public static string Of(SourceFaultKind kind) => kind switch
    {
        SourceFaultKind.NoSource => "no source",
        SourceFaultKind.UnloadedOutsideWindow => "unloaded reading outside its window",
        SourceFaultKind.CurrentLimited => "current-limited",
        SourceFaultKind.Curved => "curved",
        SourceFaultKind.Unstable => "unstable",
        SourceFaultKind.Overload => "meter overloaded",
        SourceFaultKind.NoNumber => "no number from the meter",
        SourceFaultKind.LoadNotProved => "load current not proved",
        SourceFaultKind.NotRecovered => "did not return to its unloaded reading",
        _ => throw new ArgumentOutOfRangeException(nameof(kind), kind, null),
    };
}
