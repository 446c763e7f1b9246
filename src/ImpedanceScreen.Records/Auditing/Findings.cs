namespace ImpedanceScreen.Records.Auditing;

/// <summary>Findings as they come, bounded.</summary>
internal sealed class Findings
{
    private readonly List<string> kept = [];

    public IReadOnlyList<string> Kept => kept;

    public long Count { get; private set; }

    public void Add(string finding)
    {
        Count++;
        if (kept.Count < AuditReport.MostFindings)
        {
            kept.Add(finding);
        }
    }

    public void Require(bool holds, string otherwise)
    {
        if (!holds)
        {
            Add(otherwise);
        }
    }
}
