using System.Text;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Screening.Lots;

namespace ImpedanceScreen.Station.Showing;

/// <summary>Each record's body as one line of canonical JSON: what is shown is what is sealed.</summary>
internal sealed class JsonLinesView : IResultView
{
    public Disposition? LastDisposition { get; private set; }

    public void Add(BoardRecord record)
    {
        LastDisposition = record.Disposition;
        Console.Out.WriteLine(Encoding.UTF8.GetString(BodyCodec.Encode(record)));
        Console.Out.Flush();
    }

    public void End(LotEnd? end, TimeSpan elapsed)
    {
        if (end is { Words.Length: > 0 })
        {
            Console.Error.WriteLine(end.Words);
        }
    }

    public void Dispose()
    {
    }
}
