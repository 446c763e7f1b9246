using System.Globalization;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Files;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Tests.Records.Shared;

/// <summary>
/// Random records as a station makes them: 8 outputs, 4 load points of 3 readings with 7 digits, a full budget.
/// </summary>
public sealed class RandomRecords(int seed)
{
    public const int Outputs = 8;

    private static readonly string[] Loads = ["R10k", "R4k7", "R2k2"];

    private static readonly string[] Inputs =
    [
        "certificate HL-26-0417", "load R2k2", "meter gain", "load R4k7", "noise", "load R10k", "meter offset", "lead", "branch",
        "load temperature", "resolution", "meter input resistance",
    ];

    private readonly Random random = new(seed);
    private int made;

    public FileText LimitText { get; } = new("tern-6.yaml", $"product: Tern-6\nseed: {seed}\n");

    public FileText FixtureText { get; } = new("fixture.yaml", $"fixture: F1\nseed: {seed}\n");

    public BoardRecord Board(string lot = "L-2411")
    {
        made++;
        DateTimeOffset started = new DateTimeOffset(2026, 3, 2, 20, 0, 0, TimeSpan.Zero)
            .AddSeconds(made * 19).AddTicks(random.NextInt64(10_000_000));
        StateResult[] states = [.. Enumerable.Range(1, Outputs).Select(State)];
        bool fail = states.Any(state => state.Decision == Decision.Fail);
        return new BoardRecord(
            AttemptId(started), "line-3", string.Create(CultureInfo.InvariantCulture, $"T6-{made:D6}"), 1,
            random.Next(20) == 0 ? AttemptId(started.AddDays(-1)) : null, "Tern-6", "C", lot, "mk", "tern-6-a", started,
            started.AddMilliseconds(11_000 + random.Next(800)), "0.1.0", LimitText.Sha256, FixtureText.Sha256,
            [new MeterUsed("dmm", "EXAMPLE,6-DIGIT,00123456,1.04")], Digits(23 + random.NextDouble(), 3), states,
            fail ? Disposition.Fail : Disposition.Pass, fail ? "out3 high: Rth above its limit" : string.Empty,
            new TimeSpent(random.Next(900, 1100), random.Next(3000, 3300), random.Next(3800, 3900), random.Next(900, 999), 12));
    }

    public static AttemptStart StartOf(BoardRecord board) =>
        new(board.AttemptId, board.Product, board.Serial, board.Lot, board.Fixture, board.StartedAt);

    public LotCloseRecord LotClose(string lot = "L-2411") => new(
        lot, "Tern-6", random.Next(2) == 0 ? null : "mk", new(2026, 3, 2, 20, 0, 0, TimeSpan.Zero),
        new DateTimeOffset(2026, 3, 3, 4, 0, 0, TimeSpan.Zero).AddTicks(random.NextInt64(9_999_999)), 24, 20, 3, 1, 0, "0.1.0");

    public HoldRecord Hold() => new(
        random.Next(2) == 0 ? null : "L-2411", new(2026, 3, 3, 1, 2, 3, TimeSpan.Zero),
        $"relay unit \"A\" silent, {random.Next(1000)} ms: look at its supply \u2014 then resume", "0.1.0");

    private StateResult State(int output)
    {
        double vth = output * 0.6 * (1 + ((random.NextDouble() - 0.5) * 0.02));
        double rth = 100.0 * output * (1 + ((random.NextDouble() - 0.5) * 0.04));
        var points = new List<PointRecord> { Point(null, null, vth, output, 0) };
        for (int load = 0; load < Loads.Length; load++)
        {
            double ohm = 10_000 / Math.Pow(2.13, load);
            points.Add(Point(Loads[load], random.Next(2) == 0 ? true : null, vth * ohm / (ohm + rth), output, load + 1));
        }

        bool faulty = random.Next(40) == 0;
        SourceFault? fault = faulty ? new SourceFault(
            SourceFaultKind.Curved, "voltages do not lie on a line; look at the buffer", false) : null;
        Decision decision = faulty ? Decision.Fail : Decision.Pass;
        string name = string.Create(CultureInfo.InvariantCulture, $"OUT{output}");
        return new StateResult(
            name, "high", 10, points, faulty && random.Next(2) == 0 ? null : Estimate(vth, rth), fault,
            [
                Limit(Quantity.SourceVoltage, vth, output * 0.57, output * 0.63, null),
                Limit(Quantity.InternalResistance, rth, null, output * 108.0, null),
                Limit(Quantity.Droop, rth / (rth + 4700), null, 0.2, 4700),
            ],
            decision);
    }

    private PointRecord Point(string? load, bool? contact, double volt, int output, int place) => new(
        load, false, load is null ? null : contact,
        [
            .. Enumerable.Range(0, 3).Select(reading => new ReadingRecord(
                (output * 1400) + (place * 330) + (reading * 104) + random.Next(6),
                (volt * (1 + ((random.NextDouble() - 0.5) * 4e-6))).ToString("+0.000000E+00;-0.000000E+00", CultureInfo.InvariantCulture))),
        ]);

    private Estimate Estimate(double vth, double rth) => new(
        Digits(vth, 9), Digits(rth, 9), Digits(3e-5 * Spread(), 9), Digits(0.09 * Spread(), 9),
        Digits(-random.NextDouble(), 9), Digits(1.9 + (0.1 * random.NextDouble()), 9),
        Digits(1.9 + (0.1 * random.NextDouble()), 9), Digits(2 * random.NextDouble(), 9), 2, Digits(random.NextDouble(), 9),
        [
            .. Inputs.Select((input, at) => new BudgetTerm(
                input, input == "noise" ? EvaluationType.A : EvaluationType.B,
                input.StartsWith("meter", StringComparison.Ordinal) ? InputDistribution.Rectangular : InputDistribution.Normal,
                Digits((random.Next(2) - 0.5) * 1e-5 * Spread() / (at + 1), 4),
                Digits((random.Next(2) - 0.5) * 0.1 * Spread() / (at + 1), 4),
                input == "noise" ? 60 : double.PositiveInfinity))
                .OrderByDescending(term => Math.Abs(term.InternalResistanceOhm)),
        ]);

    private LimitDecision Limit(Quantity quantity, double value, double? min, double? max, double? rated)
    {
        double expanded = Math.Abs(value) * 1e-4 * Spread();
        return new LimitDecision(
            quantity, rated, Digits(value, 9), Digits(expanded, 9), min, max, rated is null ? 1 : 0,
            rated is null ? Digits(expanded * 1.003 * Spread(), 9) : 0, 1, Decision.Pass);
    }

    private double Spread() => 0.5 + random.NextDouble();

    // Version 7 of RFC 9562, as the station makes them, so that they come in the order of time.
    private Guid AttemptId(DateTimeOffset at)
    {
        Span<byte> bytes = stackalloc byte[16];
        Guid.CreateVersion7(at).TryWriteBytes(bytes, bigEndian: true, out _);
        random.NextBytes(bytes[9..]);
        (bytes[6], bytes[7], bytes[8]) = (0x70, 0, 0x80);
        return new Guid(bytes, bigEndian: true);
    }

    private static double Digits(double value, int digits) => double.Parse(
        value.ToString("E" + (digits - 1).ToString(CultureInfo.InvariantCulture), CultureInfo.InvariantCulture),
        CultureInfo.InvariantCulture);
}
