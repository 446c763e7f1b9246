using ImpedanceScreen.Jobs;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Attempts;

namespace ImpedanceScreen.Screening.Lots;

/// <summary>The record of an attempt that an earlier process began and could not end.</summary>
internal static class AbortedRecord
{
    public static BoardRecord Of(
        AttemptStart lost, IReadOnlyList<RecordedAttempt> before, ScreeningJob job, BenchSettings settings,
        DateTimeOffset now) =>
        new(
            lost.AttemptId,
            settings.Station,
            lost.Serial,
            before.Count + 1,
            before.Count > 0 ? before[^1].AttemptId : null,
            lost.Product,
            job.Limits.Revision,
            lost.Lot,
            null,
            lost.Fixture,
            lost.StartedAt,
            now < lost.StartedAt ? lost.StartedAt : now,
            settings.ProgramVersion,
            job.Limits.Source.Sha256,
            job.Fixture.Source.Sha256,
            [],
            null,
            [],
            Disposition.Aborted,
            "the program ended during the attempt; nothing that was read is kept",
            new TimeSpent(0, 0, 0, 0, 0));
}
