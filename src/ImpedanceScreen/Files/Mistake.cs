namespace ImpedanceScreen.Files;

/// <summary>One mistake in a file that a person wrote: where it is, which key, what is wrong, how to cure it.</summary>
/// <param name="File">The file's name as the user gave it.</param>
/// <param name="Mark">Where the mistake stands.</param>
/// <param name="Key">Path of the key, as <c>outputs[2].states[0].allowed.current_a</c>; empty for the whole
/// file.</param>
/// <param name="Problem">What is wrong.</param>
/// <param name="Cure">What to do about it.</param>
public sealed record Mistake(string File, Mark Mark, string Key, string Problem, string Cure)
{
    /// <summary>One line for a person: <c>file:line:column: key: problem; cure</c>.</summary>
    public override string ToString() =>
        $"{File}:{Mark.Line}:{Mark.Column}: {(Key.Length == 0 ? "file" : Key)}: {Problem}; {Cure}";
}
