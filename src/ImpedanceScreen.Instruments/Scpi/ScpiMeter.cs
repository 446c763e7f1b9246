using System.Globalization;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Channels;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Scpi;

/// <summary>
/// A SCPI voltmeter: DC volts, fixed range, stated integration. Whenever its link is new or dirty it is asked who it is
/// and set up again before
/// anything else. The one place where an operation is tried again: a repeated reading is a new reading on a clean link.
/// </summary>
/// <remarks>Callers may come from any thread: a second one waits its turn.</remarks>
public sealed class ScpiMeter : IAsyncDisposable
{
    private const int ErrorReadsMost = 20;
    private const int LateAnswersMost = 3;

    // Longest answer to one reading with what parts it from the next, bytes; with it a line holds all that are asked
    // for together.
    private const int AnswerLength = 24;

    // A meter that is not to go on is busy for as long as this at most.
    private static readonly TimeSpan LongestTogether = TimeSpan.FromSeconds(0.5);

    private readonly Meter meter;
    private readonly Link link;
    private readonly TimeProvider time;
    private readonly ILogger log;
    private readonly ScpiSession session;
    private readonly SemaphoreSlim turn = new(1, 1);
    private readonly int readingsTogether;
    private readonly TimeSpan answerTime;
    private MeterRange? range;

    /// <summary>Makes a meter; its link is opened at its first use.</summary>
    /// <param name="meter">The meter as the fixture file declares it.</param>
    /// <param name="link">Its link.</param>
    /// <param name="channels">Opens channels.</param>
    /// <param name="time">Clock.</param>
    /// <param name="log">Log.</param>
    public ScpiMeter(Meter meter, Link link, IChannelFactory channels, TimeProvider time, ILogger log)
    {
        ArgumentNullException.ThrowIfNull(meter);
        this.meter = meter;
        this.link = link;
        this.time = time;
        this.log = log;
        session = new ScpiSession(link, channels, time, log);
        readingsTogether = (int)Math.Clamp(
            LongestTogether / meter.Integration, 1, ScpiSession.LineLength / AnswerLength);
        answerTime = link is SerialLink line ? AnswerLength * line.CharacterTime : TimeSpan.Zero;
    }

    /// <summary>Checks who answers and sets the meter up.</summary>
    /// <returns>The identity.</returns>
    /// <exception cref="ScpiException">No usable answer, another meter, or an error in its queue.</exception>
    public Task<string> StartAsync(CancellationToken cancellation) =>
        OperateAsync(_ => Task.FromResult(meter.Identity), cancellation);

    /// <summary>Fixes the range; sends nothing where it is fixed so already.</summary>
    /// <exception cref="ScpiException">No usable answer, another meter, or an error in its queue.</exception>
    public Task SetRangeAsync(MeterRange newRange, CancellationToken cancellation) => OperateAsync(
        async token =>
        {
            if (range != newRange)
            {
                range = null;
                await SendRangeAsync(newRange, token);
                range = newRange;
            }

            return true;
        },
        cancellation);

    /// <summary>
    /// Takes readings one right after another: several in one message, whose answers come in one (IEEE 488.2 section
    /// 6.3, program message units parted by semicolons), so that the meter need not wait for the station in between.
    /// </summary>
    /// <exception cref="ScpiException">No usable answer, another meter, or an error in its queue.</exception>
    /// <exception cref="InvalidOperationException">No range was set: the reading's uncertainty would be
    /// unknown.</exception>
    public async Task<IReadOnlyList<MeterReading>> ReadAsync(int count, CancellationToken cancellation)
    {
        List<MeterReading> readings = new(count);
        while (readings.Count < count)
        {
            int together = Math.Min(count - readings.Count, readingsTogether);
            readings.AddRange(await OperateAsync(token => ReadTogetherAsync(together, token), cancellation));
        }

        return readings;
    }

    /// <inheritdoc/>
    public ValueTask DisposeAsync() => session.DisposeAsync();

    private async Task<T> OperateAsync<T>(
        Func<CancellationToken, Task<T>> operation, CancellationToken cancellation)
    {
        await turn.WaitAsync(cancellation);
        try
        {
            for (int tries = 1; ; tries++)
            {
                try
                {
                    await GetReadyAsync(cancellation);
                    return await operation(cancellation);
                }
                catch (ScpiException e)
                {
                    session.Doubt();
                    if (tries > link.Retries || e.Fault is ScpiFault.WrongIdentity or ScpiFault.ErrorReported)
                    {
                        throw;
                    }

                    log.LogWarning("Meter {Meter}, try {Try}: {Why}", meter.Name, tries, e.Message);
                }
            }
        }
        finally
        {
            turn.Release();
        }
    }

    private async Task<MeterReading[]> ReadTogetherAsync(int count, CancellationToken cancellation)
    {
        if (range is null)
        {
            throw new InvalidOperationException($"Meter '{meter.Name}' has no range set.");
        }

        DateTimeOffset begun = time.GetUtcNow();
        string answer = await session.QueryAsync(
            string.Join(';', Enumerable.Repeat("READ?", count)), count * (meter.Integration + answerTime), cancellation);
        TimeSpan each = (time.GetUtcNow() - begun) / count;
        string[] answers = answer.Split(';');
        return answers.Length == count
            ? [.. answers.Select((raw, i) => Reading(raw, begun + ((i + 1) * each)))]
            : throw new ScpiException(
                ScpiFault.NotNumeric, $"'{ScpiNumber.Shown(answer)}' is not the {count} readings that were asked for.");
    }

    private static MeterReading Reading(string raw, DateTimeOffset takenAt)
    {
        ScpiNumber number = ScpiNumber.Parse(raw);
        return new MeterReading(raw, number.Condition, number.Value, takenAt);
    }

    private async Task GetReadyAsync(CancellationToken cancellation)
    {
        if (session.IsClean)
        {
            return;
        }

        TimeSpan owing = session.Owing;
        await session.CleanAsync(cancellation);
        bool ready = false;
        try
        {
            await CheckIdentityAsync(owing, cancellation);
            await SetUpAsync(cancellation);
            ready = true;
        }
        finally
        {
            if (!ready)
            {
                // A meter that was identified but not set up must not be taken for ready.
                session.Doubt();
            }
        }
    }

    private async Task CheckIdentityAsync(TimeSpan owing, CancellationToken cancellation)
    {
        // The meter may still be busy with readings that were given up.
        string identity = await session.QueryAsync("*IDN?", owing, cancellation);
        for (int late = 0; late < LateAnswersMost && ScpiNumber.TryParse(identity.Split(';')[^1], out _); late++)
        {
            // Readings that were given up arrive at last; no identity is a number.
            identity = await session.ReadLineAsync(cancellation);
        }

        if (identity != meter.Identity)
        {
            throw new ScpiException(
                ScpiFault.WrongIdentity,
                $"'{ScpiNumber.Shown(identity)}' answers where the fixture file names '{meter.Identity}'.");
        }
    }

    private async Task SetUpAsync(CancellationToken cancellation)
    {
        // What went wrong before is told, then left behind: it says nothing about what follows.
        foreach (ErrorEntry earlier in await ReadErrorsAsync(cancellation))
        {
            log.LogWarning(
                "Meter {Meter} held an earlier error: {Number} {Text}", meter.Name, earlier.Number, earlier.Text);
        }

        await session.SendAsync("*CLS", cancellation);
        await session.SendAsync("CONF:VOLT:DC", cancellation);
        await session.SendAsync($"SENS:VOLT:DC:NPLC {Number(meter.PowerLineCycles)}", cancellation);
        await CheckErrorsAsync(cancellation);
        if (range is not null)
        {
            await SendRangeAsync(range, cancellation);
        }
    }

    private async Task SendRangeAsync(MeterRange wanted, CancellationToken cancellation)
    {
        await session.SendAsync($"SENS:VOLT:DC:RANG {Number(wanted.FullScaleVolt)}", cancellation);
        await CheckErrorsAsync(cancellation);
    }

    private async Task CheckErrorsAsync(CancellationToken cancellation)
    {
        List<ErrorEntry> errors = await ReadErrorsAsync(cancellation);
        if (errors.Count > 0)
        {
            string list = string.Join("; ", errors.Select(e => $"{e.Number} {e.Text}"));
            throw new ScpiException(ScpiFault.ErrorReported, $"The error queue holds: {list}.");
        }
    }

    private async Task<List<ErrorEntry>> ReadErrorsAsync(CancellationToken cancellation)
    {
        List<ErrorEntry> errors = [];
        while (errors.Count < ErrorReadsMost)
        {
            var entry = ErrorEntry.Parse(await session.QueryAsync("SYST:ERR?", TimeSpan.Zero, cancellation));
            if (entry.Number == 0)
            {
                break;
            }

            errors.Add(entry);
        }

        return errors;
    }

    private static string Number(double value) => value.ToString("R", CultureInfo.InvariantCulture);
}
