using ImpedanceScreen.Decisions;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Quantities;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Estimation;

/// <summary>
/// From the readings of one output in one drive state to its result. Pure: the same readings, the same result.
/// </summary>
public static class StateEvaluation
{
    /// <summary>Estimates, diagnoses and decides.</summary>
    /// <param name="job">The output and state.</param>
    /// <param name="readings">What was read, in the order in which it was read; at least one point.</param>
    /// <param name="temperatureDegC">Temperature beside the loads with the sensor's standard uncertainty; null
    /// without one.</param>
    /// <param name="testsPerBoard">Diagnostic tests on the board (<see cref="DiagnosticAlarm.TestsOf"/>).</param>
    /// <param name="startedAt">When the attempt began, UTC; times of readings are kept from then.</param>
    /// <exception cref="ArgumentException">No load point at all.</exception>
    public static StateResult Evaluate(
        StateJob job, IReadOnlyList<LoadPointReadings> readings, Uncertain? temperatureDegC, int testsPerBoard,
        DateTimeOffset startedAt)
    {
        ArgumentNullException.ThrowIfNull(job);
        ArgumentNullException.ThrowIfNull(readings);
        if (readings.Count == 0)
        {
            throw new ArgumentException("Nothing was read.", nameof(readings));
        }

        double rate = DiagnosticAlarm.RatePerTest(testsPerBoard);
        var set = new ReadingSet(job, readings);
        SourceFault? fault = SourceDiagnosis.BeforeFit(set, rate);
        SourceEstimate? estimate = null;
        if (fault is null && set.Loaded.Length > 0 && set.Unloaded.Length > 0)
        {
            StateMeasurement measurement = set.Measure(set.Output, temperatureDegC);
            SourceFit fit = SourceFitter.Fit(measurement.Problem);
            estimate = fit.Converged ? SourceEstimate.Of(measurement, fit) : null;
            fault = SourceDiagnosis.OfFit(set, estimate is null ? fit with { Converged = false } : fit, rate);
            estimate = fault is null ? estimate : null;
        }

        IReadOnlyList<LimitDecision> decisions = Decide(job, estimate, temperatureDegC);
        return new(
            job.Output.Name, job.State.Name, job.Range.FullScaleVolt,
            [.. readings.Select(read => Keep(read, startedAt))],
            estimate?.Recorded(), fault, decisions, Overall(set, fault, decisions));
    }

    /// <summary>Keeps the readings of a state whose plan was cut short by an abandoned attempt: nothing is estimated.</summary>
    /// <param name="job">The output and state.</param>
    /// <param name="readings">What was read until then.</param>
    /// <param name="startedAt">When the attempt began, UTC.</param>
    public static StateResult Abandoned(
        StateJob job, IReadOnlyList<LoadPointReadings> readings, DateTimeOffset startedAt)
    {
        ArgumentNullException.ThrowIfNull(job);
        ArgumentNullException.ThrowIfNull(readings);
        return new(
            job.Output.Name, job.State.Name, job.Range.FullScaleVolt,
            [.. readings.Select(read => Keep(read, startedAt))],
            null, null, Decide(job, null, null), Decision.Undecided);
    }

    private static IReadOnlyList<LimitDecision> Decide(
        StateJob job, SourceEstimate? estimate, Uncertain? temperatureDegC)
    {
        if (estimate is null)
        {
            return [.. job.State.Limits.Select(LimitJudge.WithoutEstimate)];
        }

        IReadOnlyList<double> planned = PlannedUncertainty.Of(job, temperatureDegC);
        return [.. job.State.Limits.Select((limit, i) =>
        {
            (double value, ErrorDistribution error) = estimate.Of(limit);
            return LimitJudge.Judge(limit, value, error, planned[i]);
        })];
    }

    // A fault within the declared current range is a fail; what points at the fixture, or a plan cut short, is none.
    private static Decision Overall(ReadingSet set, SourceFault? fault, IReadOnlyList<LimitDecision> decisions)
    {
        if (fault is not null)
        {
            return fault.OfFixture ? Decision.Undecided : Decision.Fail;
        }

        Decision combined = LimitJudge.Combine(decisions.Select(decision => decision.Decision));
        return combined == Decision.Pass && !set.IsComplete ? Decision.Undecided : combined;
    }

    private static PointRecord Keep(LoadPointReadings read, DateTimeOffset startedAt) => new(
        read.Point.Load?.Name,
        read.Point.Sensed == Sensed.LoadReturn,
        read.ContactProved,
        [.. read.Readings.Select(reading => new ReadingRecord(
            (int)Math.Round((reading.TakenAt - startedAt).TotalMilliseconds), reading.Raw))]);
}
