using System.Globalization;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Lots;
using ImpedanceScreen.Station.Commands;

namespace ImpedanceScreen.Station.Showing;

/// <summary>A line a board, for output that is no terminal.</summary>
internal sealed class LotPlainView(LotTally tally, RunRequest request) : IResultView
{
    public Disposition? LastDisposition { get; private set; }

    public void Add(BoardRecord record)
    {
        LastDisposition = record.Disposition;
        tally.Add(record);
        string took = (record.EndedAt - record.StartedAt).TotalSeconds.ToString("0.00", CultureInfo.InvariantCulture);
        Console.WriteLine($"{record.Serial} {BoardView.Words(record.Disposition)} {took} s {record.Cause}".TrimEnd());
    }

    public void End(LotEnd? end, TimeSpan elapsed) => LotSummary.Write(tally, request, end, elapsed);

    public void Dispose()
    {
    }
}
