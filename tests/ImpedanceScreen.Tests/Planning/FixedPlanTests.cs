using ImpedanceScreen.Bench;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Tests.Planning;

public sealed class FixedPlanTests
{
    private readonly SourceBench bench = new(21);

    [Fact]
    public void Unloaded_comes_first_then_ascending_current_then_unloaded_again()
    {
        StateJob job = SourceBench.Job();
        Assert.Equal("-, L3300, L1000, L470, L220, -", Order(bench.Read(job, 5, 100)));
        Assert.Equal(StopReason.PlanComplete, StopOf(job, bench.Read(job, 5, 100)));
        Assert.Equal(4, Assert.IsType<PlanStep.Measure>(FixedPlan.Next(job, [], 40)).Count);
    }

    [Fact]
    public void A_rail_is_read_before_anything_else()
    {
        StateJob job = SourceBench.Job(vth: 0.1, rth: 40, rail: 5);
        Assert.Equal("rail, -, L3300, L1000, L470, L220, -", Order(bench.Read(job, 0.1, 40)));
    }

    [Theory]
    [InlineData(-5)]
    [InlineData(0)]
    [InlineData(9)]
    public void No_load_closes_where_the_unloaded_reading_is_outside_its_window(double vth)
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = bench.Read(job, vth, 100);
        Assert.Equal("-", Order(readings));
        Assert.Equal(StopReason.UnloadedOutsideWindow, StopOf(job, readings));
    }

    [Fact]
    public void At_the_first_sign_of_limiting_only_the_unloaded_reading_follows()
    {
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = bench.Read(
            job, ampere => 5 - (100 * ampere) - (3000 * Math.Max(0, ampere - 3e-3)));
        Assert.Equal("-, L3300, L1000, -", Order(readings));
        Assert.Equal(StopReason.Limiting, StopOf(job, readings));
    }

    [Theory]
    [InlineData(ReadingCondition.Overload)]
    [InlineData(ReadingCondition.NotANumber)]
    public void Nothing_follows_a_reading_that_is_no_voltage(ReadingCondition condition)
    {
        StateJob job = SourceBench.Job();
        var bad = new MeterReading("9.9E37", condition, double.NaN, SourceBench.Start);
        Assert.Equal(StopReason.NoReading, StopOf(job, [new(new LoadPoint(null), null, [bad])]));
    }

    [Fact]
    public void Nothing_follows_a_contradicted_contact()
    {
        StateJob job = SourceBench.Job(contact: true);
        LoadPointReadings[] readings = [.. bench.Read(job, 5, 100).Take(2)];
        readings[1] = readings[1] with { ContactProved = false };
        Assert.Equal(StopReason.ContactContradicted, StopOf(job, readings));
    }

    private static StopReason StopOf(StateJob job, IReadOnlyList<LoadPointReadings> readings) =>
        Assert.IsType<PlanStep.Stop>(FixedPlan.Next(job, readings, 40)).Reason;

    private static string Order(IReadOnlyList<LoadPointReadings> readings) => string.Join(
        ", ", readings.Select(read => read.Point.Sensed == Sensed.LoadReturn ? "rail" : read.Point.Load?.Name ?? "-"));
}
