namespace ImpedanceScreen.Records.Storing;

/// <summary>The steps of an append, in their order.</summary>
internal enum AppendStep
{
    /// <summary>BEGIN IMMEDIATE: from here no other process writes.</summary>
    Begin,

    /// <summary>The head is read in this transaction.</summary>
    ReadHead,

    /// <summary>The record's row goes in.</summary>
    InsertRecord,

    /// <summary>The result rows go in.</summary>
    InsertResults,

    /// <summary>The new head is signed (lot close only).</summary>
    Sign,

    /// <summary>The head moves where it still equals what was read.</summary>
    MoveHead,

    /// <summary>COMMIT: durable when it returns.</summary>
    Commit,
}

/// <summary>Carries out one step; tests replace it to fail before a step, or after it was applied.</summary>
internal delegate void AppendSeam(AppendStep step, Action action);
