using System.Text;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.SimulatedBench.Meters;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>A SCPI meter on a socket or a serial line: lines that end in a line feed, answered in order.</summary>
internal sealed class ScpiServer(BenchModel model, ScpiDialogue dialogue, Link link) : ILinkServer
{
    private const int LongestLine = 1024;

    private readonly LinePace pace = new(model, link);

    /// <inheritdoc/>
    public async Task ServeAsync(IByteChannel channel, CancellationToken cancellation)
    {
        var buffer = new byte[256];
        var line = new StringBuilder();
        while (true)
        {
            int count = await channel.ReadAsync(buffer, cancellation);
            long started = pace.Now;
            foreach (byte received in buffer.AsSpan(0, count).ToArray())
            {
                if (received != '\n')
                {
                    // A line without end is cut off, and makes no sense then.
                    line.Append(line.Length < LongestLine ? ((char)received).ToString() : "");
                    continue;
                }

                string text = line.ToString().TrimEnd('\r');
                line.Clear();
                await AnswerAsync(channel, text, started, cancellation);
                started = pace.Now;
            }
        }
    }

    private async Task AnswerAsync(IByteChannel channel, string text, long started, CancellationToken cancellation)
    {
        int bytesIn = text.Length + 1;
        await pace.PassAsync(started, bytesIn, TimeSpan.Zero, cancellation);
        string? answer = await dialogue.ExecuteAsync(text, cancellation);
        byte[] bytes = answer is null ? [] : Encoding.ASCII.GetBytes(answer + "\n");
        await pace.PassAsync(pace.Now, bytes.Length, TimeSpan.Zero, cancellation);
        if (bytes.Length > 0)
        {
            await channel.WriteAsync(bytes, cancellation);
        }

        pace.Note(bytesIn, bytes.Length);
    }
}
