using System.Globalization;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Lots;
using ImpedanceScreen.Screening.Status;
using ImpedanceScreen.Station.Commands;
using Spectre.Console;

namespace ImpedanceScreen.Station.Showing;

/// <summary>A progress bar with what the bench is doing; reads the published status and nothing else.</summary>
internal sealed class LotTerminalView : IResultView
{
    private static readonly TimeSpan Refresh = TimeSpan.FromMilliseconds(200);

    private readonly LotTally tally;
    private readonly RunRequest request;
    private readonly StatusBoard status;
    private readonly CancellationTokenSource ended = new();
    private readonly Task drawing;
    private readonly long begun = TimeProvider.System.GetTimestamp();

    public LotTerminalView(LotTally tally, RunRequest request, StatusBoard status)
    {
        this.tally = tally;
        this.request = request;
        this.status = status;
        drawing = Task.Run(DrawAsync);
    }

    public Disposition? LastDisposition { get; private set; }

    public void Add(BoardRecord record)
    {
        LastDisposition = record.Disposition;
        tally.Add(record);
    }

    public void End(LotEnd? end, TimeSpan elapsed)
    {
        ended.Cancel();
        drawing.GetAwaiter().GetResult();
        LotSummary.Write(tally, request, end, elapsed);
    }

    public void Dispose()
    {
        ended.Cancel();
        ended.Dispose();
    }

    private Task DrawAsync() =>
        AnsiConsole.Progress()
            .AutoRefresh(false)
            .Columns(new TaskDescriptionColumn { Alignment = Justify.Left }, new ProgressBarColumn(), new PercentageColumn())
            .StartAsync(async context =>
            {
                ProgressTask bar = context.AddTask("starting", maxValue: status.Current.Planned ?? 1);
                while (!ended.IsCancellationRequested)
                {
                    Draw(bar, status.Current);
                    context.Refresh();
                    await Task.Delay(Refresh, TimeProvider.System, ended.Token).ContinueWith(
                        static _ => { }, CancellationToken.None, TaskContinuationOptions.None, TaskScheduler.Default);
                }

                Draw(bar, status.Current);
                context.Refresh();
            });

    private void Draw(ProgressTask bar, BenchStatus now)
    {
        string counts = $"pass {now.Passed}  fail {now.Failed}  retest {now.Retest}";
        bar.Description = Markup.Escape($"{now.Serial ?? now.Lot} {now.Doing,-28}  {counts}{ToGo(now)}");
        if (now.Planned is { } planned)
        {
            bar.MaxValue = planned;
            bar.Value = now.Screened + (now.Activity == Activity.Measuring ? now.BoardFraction : 0);
        }
        else
        {
            bar.IsIndeterminate = true;
        }
    }

    private string ToGo(BenchStatus now)
    {
        if (now.Planned is not { } planned || now.Screened == 0)
        {
            return "";
        }

        TimeSpan left = TimeProvider.System.GetElapsedTime(begun) / now.Screened * (planned - now.Screened);
        return string.Create(CultureInfo.InvariantCulture, $"  {left:h\\:mm\\:ss} to go");
    }
}
