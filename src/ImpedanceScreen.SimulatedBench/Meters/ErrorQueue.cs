namespace ImpedanceScreen.SimulatedBench.Meters;

/// <summary>The error queue (SCPI-1999 volume 2 section 21.8): first in, first out; an overflow replaces the last
/// entry.</summary>
internal sealed class ErrorQueue
{
    private const int Longest = 20;

    private readonly LinkedList<string> entries = [];

    public void Add(ScpiError error)
    {
        if (entries.Count == Longest)
        {
            entries.RemoveLast();
            error = ScpiError.QueueOverflow;
        }

        entries.AddLast($"{error.Number},\"{error.Text}\"");
    }

    public string Next()
    {
        if (entries.First is not { } first)
        {
            return "0,\"No error\"";
        }

        entries.RemoveFirst();
        return first.Value;
    }

    public void Clear() => entries.Clear();
}

/// <summary>An error with its number and text from SCPI-1999 volume 2 section 21.8.</summary>
internal sealed record ScpiError(int Number, string Text)
{
    public static ScpiError DataType { get; } = new(-104, "Data type error");

    public static ScpiError ParameterNotAllowed { get; } = new(-108, "Parameter not allowed");

    public static ScpiError MissingParameter { get; } = new(-109, "Missing parameter");

    public static ScpiError UndefinedHeader { get; } = new(-113, "Undefined header");

    public static ScpiError OutOfRange { get; } = new(-222, "Data out of range");

    public static ScpiError QueueOverflow { get; } = new(-350, "Queue overflow");
}
