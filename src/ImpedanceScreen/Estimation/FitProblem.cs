namespace ImpedanceScreen.Estimation;

/// <summary>The mean of the readings at one load point, as the fit takes it.</summary>
/// <param name="Volt">Mean reading, V.</param>
/// <param name="StandardUncertaintyVolt">Its own uncertainty (noise and resolution), V, above zero.</param>
/// <param name="Load">Index of its load in <see cref="FitProblem.Loads"/>; -1 for unloaded.</param>
public readonly record struct FitPoint(double Volt, double StandardUncertaintyVolt, int Load);

/// <summary>The whole path of one load as the fit takes it.</summary>
/// <param name="Ohm">Stated value, Ω, above zero: load, branch and, for terminal sensing, lead.</param>
/// <param name="IndividualOhm">Standard uncertainty that this load shares with no other, Ω.</param>
public readonly record struct FitLoad(double Ohm, double IndividualOhm);

/// <summary>
/// One fit: load points with their errors, loads with theirs, and the terms that are common to several of them. A load
/// that is used at several points brings the same error to all of them.
/// </summary>
public readonly ref struct FitProblem
{
    /// <summary>Most load points of a fit.</summary>
    public const int PointLimit = 64;

    /// <summary>Most loads of a fit.</summary>
    public const int LoadLimit = 32;

    /// <summary>Most common load terms of a fit.</summary>
    public const int CommonLimit = 12;

    /// <summary>The load points in the order of their load index, unloaded (-1) first.</summary>
    public required ReadOnlySpan<FitPoint> Points { get; init; }

    /// <summary>The loads.</summary>
    public required ReadOnlySpan<FitLoad> Loads { get; init; }

    /// <summary>
    /// Common load terms: for each load, <see cref="CommonCount"/> values, Ω, by which its path grows for one standard
    /// uncertainty of the term (a certificate, the temperature, a lead).
    /// </summary>
    public ReadOnlySpan<double> CommonOhm { get; init; }

    /// <summary>Number of common load terms.</summary>
    public int CommonCount { get; init; }

    /// <summary>The meter's input conductance, S.</summary>
    public double MeterSiemens { get; init; }

    /// <summary>Voltage that loads return to, V; 0 for common.</summary>
    public double ReturnVolt { get; init; }

    /// <summary>Standard uncertainty of that voltage, V.</summary>
    public double ReturnUncertaintyVolt { get; init; }

    /// <summary>Standard uncertainty of the meter's offset, V, the same error in every reading.</summary>
    public double OffsetUncertaintyVolt { get; init; }

    /// <summary>True where the return voltage was read by the same meter and carries the same offset.</summary>
    public bool ReturnSharesOffset { get; init; }

    /// <summary>What is not as described; null where all is well.</summary>
    internal string? Mistake()
    {
        if (Points.Length is < 2 or > PointLimit)
        {
            return "A fit has 2 to 64 load points.";
        }

        if (Loads.Length > LoadLimit || CommonCount is < 0 or > CommonLimit)
        {
            return "Too many loads or common terms.";
        }

        if (CommonOhm.Length != CommonCount * Loads.Length)
        {
            return "Each load has one value for each common term.";
        }

        int load = -1;
        foreach (ref readonly FitPoint point in Points)
        {
            if (point.Load < load || point.Load >= Loads.Length)
            {
                return "Load points stand in the order of their load.";
            }

            if (!(point.StandardUncertaintyVolt > 0))
            {
                return "A reading has an uncertainty above zero.";
            }

            load = point.Load;
        }

        return null;
    }
}
