using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Records.Auditing;

/// <summary>What an audit found.</summary>
/// <param name="Records">How many records were read.</param>
/// <param name="Head">The head that the records themselves make; null where there is no record.</param>
/// <param name="Findings">What is wrong, in the order of the chain; the first <see cref="MostFindings"/> of
/// them.</param>
/// <param name="FindingCount">How many findings there are.</param>
public sealed record AuditReport(long Records, ChainHead? Head, IReadOnlyList<string> Findings, long FindingCount)
{
    /// <summary>How many findings are kept; the rest is counted.</summary>
    public const int MostFindings = 1000;

    /// <summary>Whether nothing was found.</summary>
    public bool IsClean => FindingCount == 0;
}
