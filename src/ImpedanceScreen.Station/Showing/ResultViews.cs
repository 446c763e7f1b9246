using ImpedanceScreen.Jobs;
using ImpedanceScreen.Screening.Status;
using ImpedanceScreen.Station.Commands;

namespace ImpedanceScreen.Station.Showing;

/// <summary>Chooses how a run is shown.</summary>
internal static class ResultViews
{
    public static IResultView Choose(RunRequest request, ScreeningJob job, StatusBoard status, bool single)
    {
        if (request.Json)
        {
            return new JsonLinesView();
        }

        if (single)
        {
            return new BoardView();
        }

        var tally = new LotTally(job, request.TimeScale);
        return Console.IsOutputRedirected
            ? new LotPlainView(tally, request)
            : new LotTerminalView(tally, request, status);
    }
}
