using System.Diagnostics.CodeAnalysis;

namespace ImpedanceScreen.Files;

/// <summary>What reading or binding a file gave: a value, or all the mistakes found.</summary>
/// <typeparam name="T">The type bound.</typeparam>
public sealed class Checked<T>
    where T : class
{
    private readonly T? value;

    private Checked(T? value, IReadOnlyList<Mistake> mistakes)
    {
        this.value = value;
        Mistakes = mistakes;
    }

    /// <summary>All mistakes, in the order of their places; empty when there is a value.</summary>
    public IReadOnlyList<Mistake> Mistakes { get; }

    /// <summary>The value.</summary>
    /// <exception cref="InvalidOperationException">There are mistakes instead.</exception>
    public T Value => value ?? throw new InvalidOperationException(string.Join(Environment.NewLine, Mistakes));

    /// <summary>A good result.</summary>
    public static Checked<T> Good(T value) => new(value, []);

    /// <summary>A bad result; there is at least one mistake.</summary>
    public static Checked<T> Bad(IReadOnlyList<Mistake> mistakes) =>
        mistakes.Count > 0 ? new(null, mistakes) : throw new ArgumentException("No mistake given.", nameof(mistakes));

    /// <summary>Gives the value where there is one.</summary>
    public bool TryGet([NotNullWhen(true)] out T? found)
    {
        found = value;
        return found is not null;
    }
}
