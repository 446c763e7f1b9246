using ImpedanceScreen.Quantities;

namespace ImpedanceScreen.SimulatedBench.Populations;

/// <summary>What can be wrong with an output.</summary>
public enum DefectKind
{
    /// <summary>A wrong resistor that multiplies the internal resistance.</summary>
    WrongResistance,

    /// <summary>A wrong resistor that multiplies the source voltage.</summary>
    WrongVoltage,

    /// <summary>No voltage behind the output.</summary>
    Dead,

    /// <summary>The output is tied to common through very little resistance.</summary>
    Shorted,

    /// <summary>A bad joint adds resistance in series.</summary>
    OpenJoint,

    /// <summary>The buffer holds a current and no more.</summary>
    WeakBuffer,

    /// <summary>The source voltage stops at a rail that is too low.</summary>
    RailSaturation,

    /// <summary>The source voltage scatters.</summary>
    Noisy,
}

/// <summary>One kind of defect in the mix.</summary>
/// <param name="Kind">What is wrong.</param>
/// <param name="Weight">Its weight against the others, more than 0.</param>
/// <param name="Outputs">Outputs that it can hit, each as often as the others.</param>
/// <param name="State">The one drive state that it hits; null for all.</param>
/// <param name="Size">
/// The size, drawn evenly between two bounds: a factor (wrong resistor), Ω (shorted, open joint), A (weak buffer),
/// V (rail saturation, noisy); unused for a dead output.
/// </param>
public sealed record DefectShare(
    DefectKind Kind, double Weight, IReadOnlyList<string> Outputs, string? State, Window Size);

/// <summary>The names of defects in files.</summary>
public static class DefectNames
{
    /// <summary>No defect.</summary>
    public const string None = "none";

    /// <summary>Every kind with its name and the key of its size; null where it has no size.</summary>
    public static IReadOnlyList<(DefectKind Kind, string Name, string? SizeKey)> All { get; } =
    [
        (DefectKind.WrongResistance, "wrong-resistance", "factor"),
        (DefectKind.WrongVoltage, "wrong-voltage", "factor"),
        (DefectKind.Dead, "dead", null),
        (DefectKind.Shorted, "shorted", "resistance_ohm"),
        (DefectKind.OpenJoint, "open-joint", "resistance_ohm"),
        (DefectKind.WeakBuffer, "weak-buffer", "current_a"),
        (DefectKind.RailSaturation, "rail-saturation", "voltage_v"),
        (DefectKind.Noisy, "noisy", "noise_v"),
    ];

    /// <summary>Name of a kind; <see cref="None"/> for null.</summary>
    public static string Of(DefectKind? kind) =>
        kind is { } some ? All.First(entry => entry.Kind == some).Name : None;
}
