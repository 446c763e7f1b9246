using System.CommandLine;
using System.Threading.Channels;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Screening.Serials;
using ImpedanceScreen.Station.Hosting;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>lot</c>: screen many boards.</summary>
internal static class LotCommand
{
    private static readonly Option<int?> Count = new("--count")
    {
        Description = "How many boards.", HelpName = "N",
    };

    private static readonly Option<string?> FirstSerial = new("--first-serial")
    {
        Description = "Serial numbers count up from this one; needs --count.", HelpName = "SERIAL",
    };

    private static readonly Option<string?> SerialFile = new("--serials")
    {
        Description = "File with one serial number a line, in the order of the boards.", HelpName = "FILE",
    };

    private static readonly Option<string?> BoardInNest = new("--board-in-nest")
    {
        Description = "Serial number read off a board that lies in the nest from before.", HelpName = "SERIAL",
    };

    public static Command Make()
    {
        var options = new RunOptions();
        var command = new Command(
            "lot",
            "Screen many boards. Serial numbers come from --first-serial with --count, from a file, or are typed or "
            + "scanned, one a line, on standard input.")
        {
            FirstSerial, Count, SerialFile, BoardInNest,
        };
        options.AddTo(command);
        command.SetAction((parsed, cancellation) =>
        {
            RunRequest request = options.Read(parsed);
            if (request.Lot is null)
            {
                throw new NotBegunException("--lot NAME is needed: a lot is closed and found again by its name");
            }

            return ScreeningSession.RunAsync(request, job => Choose(parsed, job.Limits), single: false, cancellation);
        });
        return command;
    }

    private static SerialChoice Choose(ParseResult parsed, LimitFile limits)
    {
        string? first = parsed.GetValue(FirstSerial);
        string? file = parsed.GetValue(SerialFile);
        int? count = parsed.GetValue(Count);
        string? inNest = parsed.GetValue(BoardInNest);
        if (count is <= 0)
        {
            throw new NotBegunException("--count must be 1 or more");
        }

        if (inNest is not null)
        {
            SerialChecks.Refuse(limits, [inNest]);
        }

        return (first, file) switch
        {
            (not null, not null) => throw new NotBegunException("--first-serial and --serials exclude each other"),
            (not null, null) => Listed(limits, Range(first, count), inNest),
            (null, not null) => Listed(limits, FromFile(file), inNest),
            _ => new SerialChoice(new ScannedSerials(StandardInputLines(), count, Prompt), inNest, count, []),
        };
    }

    private static SerialChoice Listed(LimitFile limits, IReadOnlyList<string> serials, string? inNest)
    {
        SerialChecks.Refuse(limits, serials);
        return new SerialChoice(new ListedSerials(serials), inNest, serials.Count, serials);
    }

    private static IReadOnlyList<string> Range(string first, int? count)
    {
        try
        {
            return SerialRange.From(
                first, count ?? throw new NotBegunException("--first-serial needs --count: how many boards"));
        }
        catch (FormatException e)
        {
            throw new NotBegunException(e.Message, e);
        }
    }

    private static List<string> FromFile(string path)
    {
        List<string> serials = [];
        foreach (string line in TextFiles.Read(path).Text.Split('\n'))
        {
            if (line.Trim() is { Length: > 0 } serial)
            {
                serials.Add(serial);
            }
        }

        return serials.Count > 0 ? serials : throw new NotBegunException($"{path} holds no serial number");
    }

    private static ChannelReader<string> StandardInputLines()
    {
        // A console read cannot be cancelled: it stays behind on a thread of its own, and the loop reads the channel.
        var lines = Channel.CreateBounded<string>(16);
        var reader = new Thread(() =>
        {
            while (Console.In.ReadLine() is { } line)
            {
                lines.Writer.WriteAsync(line).AsTask().GetAwaiter().GetResult();
            }

            lines.Writer.Complete();
        })
        {
            IsBackground = true, Name = "standard input",
        };
        reader.Start();
        return lines.Reader;
    }

    private static void Prompt() => Console.Error.WriteLine("scan or type the serial number of the next board:");
}
