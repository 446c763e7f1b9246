using ImpedanceScreen.Jobs;
using ImpedanceScreen.Screening.Status;
using ImpedanceScreen.Station.Commands;
using ImpedanceScreen.Station.Simulated;
using Spectre.Console;

namespace ImpedanceScreen.Station.Showing;

/// <summary>Chooses how a run is shown.</summary>
internal static class ResultViews
{
    private const int RedirectedWidth = 160;

    public static IResultView Choose(RunRequest request, ScreeningJob job, StatusBoard status, bool single)
    {
        if (request.Json)
        {
            return new JsonLinesView();
        }

        if (Console.IsOutputRedirected)
        {
            // A file has no width of its own.
            AnsiConsole.Profile.Width = RedirectedWidth;
        }

        if (single)
        {
            return new BoardView();
        }

        TruthCheck? truth = request.Simulation is null ? null : new TruthCheck(request.TruthPath);
        var tally = new LotTally(job, request.TimeScale, truth);
        return Console.IsOutputRedirected
            ? new LotPlainView(tally, request)
            : new LotTerminalView(tally, request, status);
    }
}
