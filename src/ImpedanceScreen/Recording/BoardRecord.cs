using ImpedanceScreen.Decisions;
using ImpedanceScreen.Estimation;

namespace ImpedanceScreen.Recording;

/// <summary>
/// Everything about one attempt: what it was measured with, every raw reading, what was decided and why.
/// </summary>
/// <param name="AttemptId">The attempt's own identifier, made before the board was touched.</param>
/// <param name="Station">Station name.</param>
/// <param name="Serial">Serial number of the board.</param>
/// <param name="Attempt">Number of this attempt at the serial number, from 1.</param>
/// <param name="PreviousAttemptId">The attempt before this one; null for the first.</param>
/// <param name="Product">Product.</param>
/// <param name="Revision">Product revision.</param>
/// <param name="Lot">Lot name; null where none.</param>
/// <param name="Operator">Operator; null where not stated.</param>
/// <param name="Fixture">Fixture name.</param>
/// <param name="StartedAt">UTC.</param>
/// <param name="EndedAt">UTC, not before <paramref name="StartedAt"/>.</param>
/// <param name="ProgramVersion">Version of the program.</param>
/// <param name="LimitFileSha256">SHA-256 of the limit file's text.</param>
/// <param name="FixtureFileSha256">SHA-256 of the fixture file's text.</param>
/// <param name="Meters">Identity of each meter used.</param>
/// <param name="TemperatureDegC">Temperature beside the loads, °C; null where not measured.</param>
/// <param name="States">Every output and drive state that was reached.</param>
/// <param name="Disposition">What happens to the board.</param>
/// <param name="Cause">In words: why it is not pass; empty for pass.</param>
/// <param name="TimeSpent">Where the time went.</param>
public sealed record BoardRecord(
    Guid AttemptId,
    string Station,
    string Serial,
    int Attempt,
    Guid? PreviousAttemptId,
    string Product,
    string Revision,
    string? Lot,
    string? Operator,
    string Fixture,
    DateTimeOffset StartedAt,
    DateTimeOffset EndedAt,
    string ProgramVersion,
    string LimitFileSha256,
    string FixtureFileSha256,
    IReadOnlyList<MeterUsed> Meters,
    double? TemperatureDegC,
    IReadOnlyList<StateResult> States,
    Disposition Disposition,
    string Cause,
    TimeSpent TimeSpent) : Record
{
    /// <inheritdoc/>
    public override string Kind => "board";
}

/// <summary>A meter as it named itself.</summary>
/// <param name="Name">Its name in the fixture file.</param>
/// <param name="Identity">Its answer to <c>*IDN?</c>.</param>
public sealed record MeterUsed(string Name, string Identity);

/// <summary>One output in one drive state: readings, estimate, decisions.</summary>
/// <param name="Output">Output name.</param>
/// <param name="State">Drive state name.</param>
/// <param name="RangeVolt">Full scale of the range used, V.</param>
/// <param name="Points">Load points in the order in which they were read.</param>
/// <param name="Estimate">The estimate; null where the readings give none.</param>
/// <param name="Fault">The named fault; null where the output is a linear source as far as the readings tell.</param>
/// <param name="Decisions">One a limit, in the order of the limit file.</param>
/// <param name="Decision">The decision about the output in this state.</param>
public sealed record StateResult(
    string Output,
    string State,
    double RangeVolt,
    IReadOnlyList<PointRecord> Points,
    Estimate? Estimate,
    SourceFault? Fault,
    IReadOnlyList<LimitDecision> Decisions,
    Decision Decision);

/// <summary>Readings of one load point as the record keeps them.</summary>
/// <param name="Load">Load name; null for unloaded.</param>
/// <param name="ReadsLoadReturn">True where the meter read the load return instead of the output.</param>
/// <param name="ContactProved">Mirror contact of the load relay: true closed, false open, null not wired.</param>
/// <param name="Readings">Each reading.</param>
public sealed record PointRecord(
    string? Load, bool ReadsLoadReturn, bool? ContactProved, IReadOnlyList<ReadingRecord> Readings);

/// <summary>One raw reading.</summary>
/// <param name="AtMilliseconds">Whole milliseconds since the attempt began.</param>
/// <param name="Raw">The text as the meter sent it.</param>
public sealed record ReadingRecord(int AtMilliseconds, string Raw);

/// <summary>Where the time of an attempt went, whole milliseconds.</summary>
/// <param name="SwitchingMs">Relay exchanges, operate and release times.</param>
/// <param name="SettlingMs">Waiting for the output to settle, warm-up included.</param>
/// <param name="IntegratingMs">The meter's integration.</param>
/// <param name="TalkingMs">Exchanges with the meter beyond its integration.</param>
/// <param name="OtherMs">The rest.</param>
public sealed record TimeSpent(int SwitchingMs, int SettlingMs, int IntegratingMs, int TalkingMs, int OtherMs);
