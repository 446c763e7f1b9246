namespace ImpedanceScreen.Recording;

/// <summary>One link of a station's record chain, of a kind. A body is never changed once sealed.</summary>
public abstract record Record
{
    /// <summary>The kind as it stands in the body.</summary>
    public abstract string Kind { get; }
}

/// <summary>The first record of a store: whose it is and with which key its lots are signed.</summary>
/// <param name="Station">Station name.</param>
/// <param name="CreatedAt">UTC.</param>
/// <param name="ProgramVersion">Version of the program.</param>
/// <param name="PublicKey">The station's public key (ECDSA P-256, SubjectPublicKeyInfo), base64.</param>
public sealed record StoreRecord(string Station, DateTimeOffset CreatedAt, string ProgramVersion, string PublicKey)
    : Record
{
    /// <inheritdoc/>
    public override string Kind => "store";
}

/// <summary>The close of a lot: how many boards went where. The store signs the head that this record makes.</summary>
/// <param name="Lot">Lot name.</param>
/// <param name="Product">Product.</param>
/// <param name="Operator">Who worked it; null where not stated.</param>
/// <param name="StartedAt">UTC.</param>
/// <param name="ClosedAt">UTC.</param>
/// <param name="Boards">Boards with a record in the lot, aborted attempts alone included.</param>
/// <param name="Passed">Of these, passed.</param>
/// <param name="Failed">Failed.</param>
/// <param name="Retest">To retest.</param>
/// <param name="Aborted">Attempts aborted.</param>
/// <param name="ProgramVersion">Version of the program.</param>
public sealed record LotCloseRecord(
    string Lot, string Product, string? Operator, DateTimeOffset StartedAt, DateTimeOffset ClosedAt,
    int Boards, int Passed, int Failed, int Retest, int Aborted, string ProgramVersion) : Record
{
    /// <inheritdoc/>
    public override string Kind => "lot-close";
}

/// <summary>A lot that stopped itself, or a bench that could not be made safe: waits for a person.</summary>
/// <param name="Lot">Lot name; null where no lot was running.</param>
/// <param name="At">UTC.</param>
/// <param name="Reason">Why, what to look at, how to go on.</param>
/// <param name="ProgramVersion">Version of the program.</param>
public sealed record HoldRecord(string? Lot, DateTimeOffset At, string Reason, string ProgramVersion) : Record
{
    /// <inheritdoc/>
    public override string Kind => "hold";
}
