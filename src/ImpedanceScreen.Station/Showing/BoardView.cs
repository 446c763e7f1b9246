using System.Globalization;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Lots;
using Spectre.Console;
using Spectre.Console.Rendering;

namespace ImpedanceScreen.Station.Showing;

/// <summary>One board: per output the estimate with its expanded uncertainty, limits, decision and cause.</summary>
internal sealed class BoardView : IResultView
{
    // Below this width the guard band and the probability of conformity are left to the record.
    private const int WidthOfAllColumns = 112;

    public Disposition? LastDisposition { get; private set; }

    public void Add(BoardRecord record)
    {
        LastDisposition = record.Disposition;
        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture,
            $"[bold]{record.Product}[/] revision {record.Revision}, serial [bold]{record.Serial}[/], attempt {record.Attempt}");
        bool wide = AnsiConsole.Profile.Width >= WidthOfAllColumns;
        string[] columns = wide
            ? ["output", "quantity", "value ± U (95 %)", "limits", "decision", "guard band", "P(conforms)"]
            : ["output", "quantity", "value ± U (95 %)", "limits", "decision"];
        Table table = new Table().Border(TableBorder.Horizontal);
        Array.ForEach(columns, column => table.AddColumn(new TableColumn(column).NoWrap()));
        foreach (StateResult state in record.States)
        {
            AddRows(table, state, wide);
        }

        AnsiConsole.Write(table);
        foreach (StateResult state in record.States.Where(state => state.Fault is not null))
        {
            AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"{state.Output} {state.State}: [bold]{state.Fault!.Words}[/]");
        }

        TimeSpent time = record.TimeSpent;
        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture,
            $"{record.EndedAt - record.StartedAt:s\\.ff} s: switching {time.SwitchingMs} ms, settling {time.SettlingMs} ms, integrating {time.IntegratingMs} ms, talking {time.TalkingMs} ms, other {time.OtherMs} ms");
        AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"[bold]{Words(record.Disposition)}[/] {record.Cause}");
    }

    public void End(LotEnd? end, TimeSpan elapsed)
    {
        if (end?.Kind != LotEndKind.Complete)
        {
            AnsiConsole.MarkupLineInterpolated(
            CultureInfo.InvariantCulture, $"[bold]{EndWords.Of(end)}[/]");
        }
    }

    public void Dispose()
    {
    }

    internal static string Words(Disposition disposition) => disposition switch
    {
        Disposition.Pass => "PASS",
        Disposition.Fail => "FAIL",
        Disposition.Retest => "RETEST",
        _ => "ABORTED",
    };

    private static void AddRows(Table table, StateResult state, bool wide)
    {
        string place = $"{state.Output} {state.State}";
        if (state.Decisions.Count == 0)
        {
            table.AddRow(new Text(place), new Text("-"), new Text("no estimate"), new Text(""), Mark(state.Decision));
            return;
        }

        foreach (LimitDecision limit in state.Decisions)
        {
            List<IRenderable> cells =
            [
                new Text(place), new Text(QuantityText.Name(limit)), new Text(QuantityText.Value(limit)),
                new Text(QuantityText.Limits(limit)), Mark(limit.Decision),
            ];
            if (wide)
            {
                cells.Add(new Text(QuantityText.GuardBand(limit)));
                cells.Add(new Text(QuantityText.Probability(limit.ConformityProbability)));
            }

            table.AddRow(cells);
            place = "";
        }
    }

    private static Markup Mark(Decision decision) => decision switch
    {
        Decision.Pass => new Markup("pass"),
        Decision.Fail => new Markup("[bold]FAIL[/]"),
        _ => new Markup("[bold]undecided[/]"),
    };
}
