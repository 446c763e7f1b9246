using System.CommandLine;
using System.Globalization;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records;
using ImpedanceScreen.Records.Auditing;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>audit</c>: read every record again and name what was changed.</summary>
internal static class AuditCommand
{
    private const int LinkDigits = 64;

    public static Command Make()
    {
        Option<string> store = FileOptions.Store();
        Option<string?> head = new("--head")
        {
            Description = "A head written down before, SEQUENCE:LINK: proves that no later part was cut off.",
            HelpName = "HEAD",
        };
        var command = new Command("audit", "Read all records again; name what was changed, removed, inserted or moved.")
        {
            store, head,
        };
        command.SetAction((parsed, cancellation) =>
            Task.FromResult(Run(parsed.GetRequiredValue(store), ParseHead(parsed.GetValue(head)), cancellation)));
        return command;
    }

    private static int Run(string path, ChainHead? known, CancellationToken cancellation)
    {
        AuditReport report;
        try
        {
            report = Audit.Run(path, known, cancellation);
        }
        catch (Exception e) when (e is IOException or InvalidOperationException)
        {
            throw new NotBegunException(e.Message, e);
        }
        catch (OperationCanceledException)
        {
            return ExitCode.Stopped;
        }

        foreach (string finding in report.Findings)
        {
            Console.WriteLine(finding);
        }

        string head = report.Head is { } last ? $"{last.Sequence}:{last.Link}" : "none";
        Console.WriteLine(report.IsClean
            ? $"audit clean: {report.Records} records, head {head}"
            : $"audit: {report.FindingCount} findings in {report.Records} records, head {head}");
        return report.IsClean ? ExitCode.Done : ExitCode.Wrong;
    }

    private static ChainHead? ParseHead(string? text)
    {
        if (text is null)
        {
            return null;
        }

        int colon = text.IndexOf(':', StringComparison.Ordinal);
        return colon > 0
            && long.TryParse(text.AsSpan(0, colon), NumberStyles.None, CultureInfo.InvariantCulture, out long sequence)
            && text.Length == colon + 1 + LinkDigits
            && text.Skip(colon + 1).All(char.IsAsciiHexDigitLower)
                ? new ChainHead(sequence, text[(colon + 1)..])
                : throw new NotBegunException($"--head '{text}' is no head: SEQUENCE:LINK as a lot prints it");
    }
}
