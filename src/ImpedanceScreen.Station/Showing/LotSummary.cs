using System.Globalization;
using ImpedanceScreen.Screening.Lots;
using ImpedanceScreen.Station.Commands;
using ImpedanceScreen.Station.Hosting;
using Spectre.Console;

namespace ImpedanceScreen.Station.Showing;

/// <summary>The summary at the end of a lot, the same on a terminal and in a file.</summary>
internal static class LotSummary
{
    public static void Write(LotTally tally, RunRequest request, LotEnd? end, TimeSpan elapsed)
    {
        AnsiConsole.WriteLine();
        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"[bold]lot {request.Lot}[/]: {EndWords.Of(end)}");
        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture,
            $"{tally.Screened} boards: {tally.Passed} pass, {tally.Failed} fail, {tally.Retest} retest; {tally.Aborted} attempts aborted");
        if (tally.Screened > 0)
        {
            AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"yield {Ratio(100.0 * tally.Passed / tally.Screened, "0.0")} %");
            AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture,
            $"median time a board {Ratio(tally.MedianSeconds, "0.00")} s, {Ratio(tally.MedianOverFloor, "0.000")} times the bench floor");
            AnsiConsole.MarkupLineInterpolated(
                CultureInfo.InvariantCulture, $"(declared waits and integration); {Ratio(elapsed.TotalSeconds, "0.0")} s in all");
        }

        if (tally.Causes.Any())
        {
            Table table = new Table().Border(TableBorder.Horizontal).AddColumns("output", "cause", "boards");
            table.Columns[2].RightAligned();
            foreach ((string place, string cause, int boards) in tally.Causes)
            {
                table.AddRow(new Text(place), new Text(cause), new Text(boards.ToString(CultureInfo.InvariantCulture)));
            }

            AnsiConsole.Write(table);
        }

        if (tally.Truth is { } truth)
        {
            AnsiConsole.MarkupLineInterpolated(CultureInfo.InvariantCulture, $"{truth}");
        }

        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"records {request.StorePath}");
        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"log     {StationLog.Newest(StationLog.PathFor(request.StorePath, request.LogFolder))}");
        if (end is not null)
        {
            AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"head    {end.Head.Sequence}:{end.Head.Link}");
        }
    }

    private static string Ratio(double value, string format) => value.ToString(format, CultureInfo.InvariantCulture);
}
