using ImpedanceScreen.Screening.Lots;

namespace ImpedanceScreen.Station.Showing;

/// <summary>How a run ended, for a person.</summary>
internal static class EndWords
{
    public static string Of(LotEnd? end) => end?.Kind switch
    {
        LotEndKind.Complete => "complete",
        LotEndKind.Stopped => "stopped on request; all relays were opened",
        LotEndKind.OnHold => $"ON HOLD: {end.Words}",
        LotEndKind.StoreFault => $"RECORDS CANNOT BE KEPT: {end.Words}",
        _ => "ENDED BY AN UNFORESEEN ERROR: see the log",
    };
}
