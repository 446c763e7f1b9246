using System.Globalization;
using System.Text.RegularExpressions;

namespace ImpedanceScreen.Benchmarks.Durability;

/// <summary>Something the station asked of the operating system, in order.</summary>
internal abstract record TracedCall
{
    /// <summary>The store's write-ahead log was written to.</summary>
    internal sealed record LogWritten : TracedCall;

    /// <summary>A sync of the write-ahead log came back.</summary>
    /// <param name="Covered">How many of the log's writes so far it covers: those that came before it began.</param>
    internal sealed record LogSynced(int Covered) : TracedCall;

    /// <summary>A request over TCP was handed to the kernel.</summary>
    internal sealed record Sent(int Port, byte[] Request) : TracedCall;
}

/// <summary>
/// Reads what strace printed with <c>-f -yy -x</c>: descriptors with their files and sockets, bytes in hexadecimal.
/// A call of one thread that another thread's interrupts stands in two lines, unfinished and resumed.
/// </summary>
internal static partial class SystemCallTrace
{
    /// <summary>The calls that are traced.</summary>
    public const string Calls = "pwrite64,pwritev,write,writev,fsync,fdatasync,sendto,sendmsg";

    /// <summary>Reads a trace.</summary>
    public static List<TracedCall> Read(IEnumerable<string> lines)
    {
        List<TracedCall> calls = [];
        Dictionary<string, int> syncsUnderWay = [];
        int written = 0;
        foreach (string line in lines)
        {
            if (Resumed().Match(line) is { Success: true } resumed)
            {
                if (syncsUnderWay.Remove(resumed.Groups["thread"].Value, out int covered) && Succeeded(line))
                {
                    calls.Add(new TracedCall.LogSynced(covered));
                }

                continue;
            }

            if (Begun().Match(line) is not { Success: true } begun)
            {
                continue;
            }

            string file = begun.Groups["file"].Value;
            bool toLog = file.EndsWith("-wal", StringComparison.Ordinal);
            bool sync = begun.Groups["call"].Value.EndsWith("sync", StringComparison.Ordinal);
            if (toLog && !sync)
            {
                written++;
                calls.Add(new TracedCall.LogWritten());
            }
            else if (toLog && line.Contains("<unfinished", StringComparison.Ordinal))
            {
                syncsUnderWay[begun.Groups["thread"].Value] = written;
            }
            else if (toLog && Succeeded(line))
            {
                calls.Add(new TracedCall.LogSynced(written));
            }
            else if (Peer().Match(file) is { Success: true } peer && Bytes().Match(line) is { Success: true } bytes)
            {
                calls.Add(new TracedCall.Sent(
                    int.Parse(peer.Groups["port"].ValueSpan, CultureInfo.InvariantCulture),
                    Convert.FromHexString(bytes.Groups["hex"].Value.Replace("\\x", "", StringComparison.Ordinal))));
            }
        }

        return calls;
    }

    private static bool Succeeded(string line) => line.EndsWith("= 0", StringComparison.Ordinal);

    [GeneratedRegex(@"^(?<thread>\d+) +<\.\.\. \w+ resumed>", RegexOptions.None, 1000)]
    private static partial Regex Resumed();

    [GeneratedRegex(
        @"^(?<thread>\d+) +(?<call>\w+)\(\d+<(?<file>(?:TCP(?:v6)?:\[[^<]*?\]|[^>]*))>", RegexOptions.None, 1000)]
    private static partial Regex Begun();

    [GeneratedRegex(@"^TCP(v6)?:\[.*->.*:(?<port>\d+)\]$", RegexOptions.ExplicitCapture, 1000)]
    private static partial Regex Peer();

    [GeneratedRegex(@"""(?<hex>(\\x[0-9a-f]{2})+)""", RegexOptions.ExplicitCapture, 1000)]
    private static partial Regex Bytes();
}
