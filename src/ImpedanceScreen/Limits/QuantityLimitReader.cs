using ImpedanceScreen.Files;

namespace ImpedanceScreen.Limits;

/// <summary>Reads the limits of one drive state.</summary>
internal static class QuantityLimitReader
{
    private const double Percent = 0.01;

    /// <summary>The key under which a quantity is limited; its unit is that of <c>min</c> and <c>max</c>.</summary>
    internal static string KeyOf(Quantity quantity) => quantity switch
    {
        Quantity.SourceVoltage => "source_voltage_v",
        Quantity.InternalResistance => "internal_resistance_ohm",
        _ => "droop_percent",
    };

    internal static IReadOnlyList<QuantityLimit> Read(MappingReader reader)
    {
        List<QuantityLimit> limits = [];
        bool any = false;
        foreach (Quantity quantity in Enum.GetValues<Quantity>())
        {
            string key = KeyOf(quantity);
            if (reader.OptionalMapping(key, nested => Limit(nested, quantity)) is { } limit)
            {
                limits.Add(limit);
            }

            any |= reader.Holds(key);
        }

        if (!any)
        {
            reader.Mistake("", "nothing is limited", "give at least one of the limits");
        }

        return limits;
    }

    private static QuantityLimit Limit(MappingReader reader, Quantity quantity)
    {
        bool droop = quantity == Quantity.Droop;
        double scale = droop ? Percent : 1.0;
        double? min = reader.OptionalNumber("min", NumberRange.Any);
        double? max = reader.OptionalNumber("max", NumberRange.Any);
        double? ratedLoad = droop ? reader.Number("rated_load_ohm", NumberRange.Positive) : null;
        DecisionRule rule = Rule(reader);
        if (!reader.Holds("min") && !reader.Holds("max"))
        {
            reader.Mistake("", "the limit has neither `min` nor `max`", "give one or both");
        }

        if (min >= max)
        {
            reader.Mistake("min", "no value fits: min is not below max", "exchange or correct them");
        }

        return new(quantity, min * scale, max * scale, rule, ratedLoad);
    }

    private static DecisionRule Rule(MappingReader reader)
    {
        bool guarded = reader.Word("rule", ("simple", false), ("guarded", true));
        if (guarded)
        {
            return new(reader.Number("guard_factor", NumberRange.PositiveUpTo(10)));
        }

        if (reader.OptionalNumber("guard_factor", NumberRange.Any) is not null && reader.Bound("rule"))
        {
            reader.Mistake(
                "guard_factor", "a simple rule has no guard band", "remove it, or write `rule: guarded`");
        }

        return DecisionRule.Simple;
    }
}
