using ImpedanceScreen.Bench;
using ImpedanceScreen.Decisions;
using ImpedanceScreen.Limits;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>From the decisions about outputs to what happens to the board.</summary>
internal static class BoardDisposition
{
    public static (Disposition Disposition, string Cause) Of(
        AttemptOrder order, IReadOnlyList<StateResult> results, Exception? interruption, AllOpenOutcome allOpen)
    {
        if (interruption is not null || !allOpen.Confirmed)
        {
            string why = interruption is OperationCanceledException
                ? "the program was told to stop"
                : interruption?.Message ?? "";
            return (Disposition.Aborted, allOpen.Confirmed ? why : Join(why, $"relays not proved open: {allOpen.Alarm}"));
        }

        Decision board = LimitJudge.Combine(results.Select(result => result.Decision));
        string causes = string.Join("; ", results.Where(result => result.Decision != Decision.Pass).Select(Cause));
        return board switch
        {
            Decision.Pass when order.FailedBefore =>
                (Disposition.Fail, "an earlier attempt failed: being tried again does not make it a pass"),
            Decision.Pass => (Disposition.Pass, ""),
            Decision.Fail => (Disposition.Fail, causes),
            _ when order.FailedBefore => (Disposition.Fail, Join("an earlier attempt failed", causes)),
            _ when order.Job.Limits.Undecided == UndecidedRule.Fail => (Disposition.Fail, causes),
            _ => (Disposition.Retest, causes),
        };
    }

    private static string Cause(StateResult result)
    {
        string place = $"{result.Output} {result.State}: ";
        if (result.Fault is { } fault)
        {
            return place + fault.Words;
        }

        return place + string.Join(
            ", ",
            result.Decisions
                .Where(limit => limit.Decision != Decision.Pass)
                .Select(limit =>
                    $"{Words(limit.Quantity)} {(limit.Decision == Decision.Fail ? "outside its limit" : "undecided")}"));
    }

    private static string Words(Quantity quantity) => quantity switch
    {
        Quantity.SourceVoltage => "source voltage",
        Quantity.InternalResistance => "internal resistance",
        _ => "droop at rated load",
    };

    private static string Join(string first, string second) => first.Length == 0 ? second : $"{first}; {second}";
}
