namespace ImpedanceScreen.Bench;

/// <summary>One value from the meter.</summary>
/// <param name="Raw">The text as the meter sent it, without terminator.</param>
/// <param name="Condition">Whether it is a voltage at all.</param>
/// <param name="Volt">The voltage, V; NaN unless the condition is <see cref="ReadingCondition.Valid"/>.</param>
/// <param name="TakenAt">When the answer was complete, UTC.</param>
public readonly record struct MeterReading(string Raw, ReadingCondition Condition, double Volt, DateTimeOffset TakenAt);

/// <summary>Whether a reading is a voltage.</summary>
public enum ReadingCondition
{
    /// <summary>A voltage.</summary>
    Valid,

    /// <summary>The input exceeds the range (SCPI-1999: ±9.9E37).</summary>
    Overload,

    /// <summary>Not a number (SCPI-1999: 9.91E37).</summary>
    NotANumber,
}
