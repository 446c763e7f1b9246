namespace ImpedanceScreen.Files;

/// <summary>Collects the mistakes of one file.</summary>
/// <param name="file">The file's name as the user gave it.</param>
public sealed class MistakeList(string file)
{
    private readonly List<Mistake> mistakes = [];
    private int leftUnread;

    /// <summary>How many there are so far.</summary>
    public int Count => mistakes.Count;

    /// <summary>
    /// Grows with each mistake, and with each value that was left unread because its mistake had been noted earlier:
    /// what was read while this stood still was read well.
    /// </summary>
    internal int Doubts => mistakes.Count + leftUnread;

    /// <summary>Adds one.</summary>
    /// <param name="mark">Where it stands.</param>
    /// <param name="key">Path of the key; empty for the whole file.</param>
    /// <param name="problem">What is wrong.</param>
    /// <param name="cure">What to do about it.</param>
    public void Add(Mark mark, string key, string problem, string cure) =>
        mistakes.Add(new(file, mark, key, problem, cure));

    /// <summary>Forgets all: beside a syntax error, what was read before may mean anything.</summary>
    public void Clear() => mistakes.Clear();

    /// <summary>A value is left unread whose mistake is in the list already.</summary>
    internal void LeaveUnread() => leftUnread++;

    /// <summary>All of them in the order of their places.</summary>
    public IReadOnlyList<Mistake> InOrder() =>
        [.. mistakes.OrderBy(mistake => mistake.Mark.Line).ThenBy(mistake => mistake.Mark.Column)];
}
