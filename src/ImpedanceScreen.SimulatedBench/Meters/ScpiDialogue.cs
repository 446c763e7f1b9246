using System.Globalization;

namespace ImpedanceScreen.SimulatedBench.Meters;

/// <summary>What a simulated meter understands, and what it answers.</summary>
internal sealed class ScpiDialogue : IDisposable
{
    // Integrations that a meter of this class offers, in power-line cycles: common practice.
    private const double CyclesMin = 0.001;
    private const double CyclesMax = 100.0;

    private readonly SimulatedMeter meter;
    private readonly ErrorQueue errors = new();

    // A meter has one parser, over however many connections it is asked.
    private readonly SemaphoreSlim turn = new(1, 1);
    private readonly List<(ScpiPattern Pattern, Func<string, CancellationToken, Task<string?>> Act)> commands;

    public ScpiDialogue(SimulatedMeter meter)
    {
        this.meter = meter;
        commands =
        [
            Query("*IDN", () => meter.Meter.Identity),
            Query("*OPC", () => "1"),
            Order("*CLS", errors.Clear),
            Order("*RST", meter.Reset),
            Query("SYSTem:ERRor[:NEXT]", errors.Next),
            (new ScpiPattern("CONFigure[:VOLTage][:DC]"), (argument, _) => Configure(argument)),
            (new ScpiPattern("[SENSe:]VOLTage[:DC]:RANGe[:UPPer]"), (argument, _) => Take(argument, FixRange)),
            Query("[SENSe:]VOLTage[:DC]:RANGe[:UPPer]", () => Number(meter.FullScaleVolt)),
            (new ScpiPattern("[SENSe:]VOLTage[:DC]:NPLCycles"), (argument, _) => Take(argument, SetCycles)),
            Query("[SENSe:]VOLTage[:DC]:NPLCycles", () => Number(meter.Cycles)),
            (new ScpiPattern("READ?"), async (argument, cancellation) =>
                Refused(argument) ? null : await meter.ReadAsync(cancellation)),
        ];
    }

    /// <summary>Carries out one line.</summary>
    /// <param name="line">The line without its terminator; commands are parted by semicolons.</param>
    /// <param name="cancellation">Ends the bench.</param>
    /// <returns>The answers, parted by semicolons; null where nothing was asked.</returns>
    public async Task<string?> ExecuteAsync(string line, CancellationToken cancellation)
    {
        await turn.WaitAsync(cancellation);
        try
        {
            return await ExecuteInTurnAsync(line, cancellation);
        }
        finally
        {
            turn.Release();
        }
    }

    /// <inheritdoc/>
    public void Dispose() => turn.Dispose();

    private async Task<string?> ExecuteInTurnAsync(string line, CancellationToken cancellation)
    {
        List<string> answers = [];
        foreach (string command in line.Split(';', StringSplitOptions.TrimEntries | StringSplitOptions.RemoveEmptyEntries))
        {
            string[] parts = command.Split([' ', '\t'], 2, StringSplitOptions.TrimEntries);
            string argument = parts.Length > 1 ? parts[1] : "";
            int found = commands.FindIndex(known => known.Pattern.Matches(parts[0]));
            if (found < 0)
            {
                errors.Add(ScpiError.UndefinedHeader);
            }
            else if (await commands[found].Act(argument, cancellation) is { } answer)
            {
                answers.Add(answer);
            }
        }

        return answers.Count > 0 ? string.Join(';', answers) : null;
    }

    private (ScpiPattern, Func<string, CancellationToken, Task<string?>>) Query(string header, Func<string> answer) =>
        (new ScpiPattern(header + "?"), (argument, _) => Task.FromResult(Refused(argument) ? null : answer()));

    private (ScpiPattern, Func<string, CancellationToken, Task<string?>>) Order(string header, Action act) =>
        (new ScpiPattern(header), (argument, _) =>
        {
            if (!Refused(argument))
            {
                act();
            }

            return Task.FromResult<string?>(null);
        });

    private Task<string?> Configure(string argument)
    {
        meter.Reset();
        return argument.Length == 0 ? Task.FromResult<string?>(null) : Take(argument, FixRange);
    }

    private Task<string?> Take(string argument, Func<double, bool> set)
    {
        if (argument.Length == 0)
        {
            errors.Add(ScpiError.MissingParameter);
        }
        else if (!double.TryParse(argument, NumberStyles.Float, CultureInfo.InvariantCulture, out double value))
        {
            errors.Add(ScpiError.DataType);
        }
        else if (!set(value))
        {
            errors.Add(ScpiError.OutOfRange);
        }

        return Task.FromResult<string?>(null);
    }

    private bool FixRange(double volt) => meter.FixRange(volt);

    private bool SetCycles(double cycles)
    {
        if (!(cycles is >= CyclesMin and <= CyclesMax))
        {
            return false;
        }

        meter.Cycles = cycles;
        return true;
    }

    private bool Refused(string argument)
    {
        if (argument.Length > 0)
        {
            errors.Add(ScpiError.ParameterNotAllowed);
        }

        return argument.Length > 0;
    }

    private static string Number(double value) => value.ToString("0.000000E+00", CultureInfo.InvariantCulture);
}
