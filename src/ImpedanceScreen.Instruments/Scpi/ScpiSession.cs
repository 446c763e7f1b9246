using System.Text;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using ImpedanceScreen.Timing;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Scpi;

/// <summary>
/// Lines to and from one instrument: LF is sent and expected, CR is stripped, a line is bounded, one query is
/// outstanding. A raw
/// socket or a serial line has no device clear, so after a failure the session is dirty: <see cref="CleanAsync"/>
/// reopens a socket and
/// drains a serial line.
/// </summary>
/// <remarks>One caller at a time.</remarks>
public sealed class ScpiSession : IAsyncDisposable
{
    /// <summary>
    /// Longest line, bytes: the longest answer in use, an error text, has 255 (SCPI-1999 Volume 2, 21.8).
    /// </summary>
    public const int LineLength = 512;

    private const byte LineFeed = (byte)'\n';

    private readonly byte[] outgoing = new byte[LineLength];
    private readonly byte[] incoming = new byte[LineLength];
    private readonly Link link;
    private readonly TimeProvider time;
    private readonly LiveLink live;
    private IByteChannel? channel;
    private Deadline? outstanding;
    private int received;

    /// <summary>Makes a session; the link is opened by <see cref="CleanAsync"/>.</summary>
    public ScpiSession(Link link, IChannelFactory channels, TimeProvider time, ILogger log)
    {
        ArgumentNullException.ThrowIfNull(link);
        this.link = link;
        this.time = time;
        live = new LiveLink(link, channels, time, log);
    }

    /// <summary>
    /// Whether the next answer would belong to the next query. False at the beginning and after any failure: the
    /// instrument is then
    /// to be asked who it is, and set up again.
    /// </summary>
    public bool IsClean { get; private set; }

    /// <summary>How long an answer that was given up may still be under way.</summary>
    public TimeSpan Owing => outstanding is { } due ? due.Remaining : TimeSpan.Zero;

    /// <summary>Opens the link, reopens a socket, or drains a serial line.</summary>
    /// <exception cref="ScpiException">The link does not open.</exception>
    public async Task CleanAsync(CancellationToken cancellation)
    {
        bool opened = channel is null or { IsDead: true };
        if (link is TcpLink && !opened)
        {
            await live.DropAsync();
        }

        try
        {
            channel = await live.GetAsync(cancellation);
            received = 0;
            if (link is SerialLink)
            {
                await DrainAsync(cancellation);
            }
        }
        catch (LinkLostException e)
        {
            throw new ScpiException(ScpiFault.LinkLost, e.Message, e);
        }

        IsClean = true;
    }

    /// <summary>Sends a command that has no answer.</summary>
    /// <exception cref="ScpiException">It could not be sent.</exception>
    public async Task SendAsync(string command, CancellationToken cancellation) =>
        await ExchangeAsync(command, TimeSpan.Zero, hasAnswer: false, cancellation);

    /// <summary>Sends a query and waits for its answer.</summary>
    /// <param name="query">The query.</param>
    /// <param name="duration">What the instrument needs for it beyond the link's time-out.</param>
    /// <param name="cancellation">Ends the wait; the session is dirty then.</param>
    /// <returns>The answer without its terminator.</returns>
    /// <exception cref="ScpiException">No answer.</exception>
    public Task<string> QueryAsync(string query, TimeSpan duration, CancellationToken cancellation) =>
        ExchangeAsync(query, duration, hasAnswer: true, cancellation);

    /// <summary>Waits for one more answer line after one that was not the one due.</summary>
    /// <exception cref="ScpiException">No answer.</exception>
    public Task<string> ReadLineAsync(CancellationToken cancellation) =>
        GuardAsync(ReceiveLineAsync, TimeSpan.Zero, cancellation);

    /// <summary>What was answered makes no sense: the next use cleans up first.</summary>
    public void Doubt() => IsClean = false;

    /// <inheritdoc/>
    public ValueTask DisposeAsync() => live.DisposeAsync();

    private Task<string> ExchangeAsync(
        string message, TimeSpan duration, bool hasAnswer, CancellationToken cancellation)
    {
        if (!IsClean || channel is null)
        {
            throw new InvalidOperationException("The session is dirty; clean it first.");
        }

        int length = Encoding.ASCII.GetBytes(message, outgoing);
        outgoing[length++] = LineFeed;
        TimeSpan lineTime = link is SerialLink line ? length * line.CharacterTime : TimeSpan.Zero;
        return GuardAsync(
            async token =>
            {
                received = 0;
                channel.DiscardReceived();
                await channel.WriteAsync(outgoing.AsMemory(0, length), token);
                return hasAnswer ? await ReceiveLineAsync(token) : string.Empty;
            },
            duration + lineTime,
            cancellation);
    }

    // The one place where an exchange is limited in time and a failure makes the session dirty.
    private async Task<string> GuardAsync(
        Func<CancellationToken, Task<string>> exchange, TimeSpan duration, CancellationToken cancellation)
    {
        IsClean = false;
        outstanding = Deadline.In(time, link.Timeout + duration);
        using var limit = new TimeLimit(time, link.Timeout + duration, cancellation);
        try
        {
            string answer = await exchange(limit.Token);
            IsClean = true;
            outstanding = null;
            live.Proved();
            return answer;
        }
        catch (OperationCanceledException e) when (limit.Expired)
        {
            throw new ScpiException(
                ScpiFault.Timeout, $"No complete answer within {(link.Timeout + duration).TotalMilliseconds} ms.", e);
        }
        catch (LinkLostException e)
        {
            throw new ScpiException(ScpiFault.LinkLost, e.Message, e);
        }
    }

    // What arrived behind a line stays for ReadLineAsync; the next query drops it.
    private async Task<string> ReceiveLineAsync(CancellationToken cancellation)
    {
        int searched = 0;
        int end;
        while ((end = incoming.AsSpan(searched, received - searched).IndexOf(LineFeed)) < 0)
        {
            searched = received;
            if (received == LineLength)
            {
                throw new ScpiException(
                    ScpiFault.LineTooLong, $"An answer does not end within {LineLength} bytes.");
            }

            received += await channel!.ReadAsync(incoming.AsMemory(received), cancellation);
        }

        end += searched;
        string line = Encoding.Latin1.GetString(incoming, 0, end).TrimEnd('\r');
        received -= end + 1;
        incoming.AsSpan(end + 1, received).CopyTo(incoming);
        return line;
    }

    // The answer that is outstanding comes, or its time passes; then the line is read until it is quiet.
    private async Task DrainAsync(CancellationToken cancellation)
    {
        if (outstanding is { Passed: false } due)
        {
            using var limit = new TimeLimit(time, due.Remaining, cancellation);
            try
            {
                await ReceiveLineAsync(limit.Token);
            }
            catch (Exception e) when (e is ScpiException || (e is OperationCanceledException && limit.Expired))
            {
                // Either way the answer that was due is no longer to be expected.
            }
        }

        outstanding = null;
        await QuietLine.DrainAsync(channel!, time, cancellation);
    }
}
