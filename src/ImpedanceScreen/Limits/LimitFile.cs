using ImpedanceScreen.Files;

namespace ImpedanceScreen.Limits;

/// <summary>What a product must be: its outputs, their drive states and the limits on each.</summary>
/// <param name="Source">The text this was bound from.</param>
/// <param name="Product">Product name.</param>
/// <param name="Revision">Product revision; text, never a number.</param>
/// <param name="SerialPattern">Regular expression that a whole serial number matches.</param>
/// <param name="VoltageCeilingVolt">The highest DC voltage on the board, V; at most 60 (the program's own
/// scope).</param>
/// <param name="Undecided">What becomes of a board that is still undecided.</param>
/// <param name="Outputs">The outputs, in the order in which they are screened.</param>
/// <param name="VoltageCeilingVoltAcRms">Highest AC voltage on the board, V rms, at most 25; null for none.</param>
public sealed record LimitFile(
    FileText Source,
    string Product,
    string Revision,
    string SerialPattern,
    double VoltageCeilingVolt,
    UndecidedRule Undecided,
    IReadOnlyList<OutputLimits> Outputs,
    double? VoltageCeilingVoltAcRms = null);

/// <summary>What becomes of a board that is undecided when no further reading helps.</summary>
public enum UndecidedRule
{
    /// <summary>The board is to be screened again.</summary>
    Retest,

    /// <summary>The board fails.</summary>
    Fail,
}
