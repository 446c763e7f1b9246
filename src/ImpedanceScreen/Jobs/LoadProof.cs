using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Jobs;

/// <summary>
/// What a load must change before its change proves that load current flowed, and what it will change on a nominal
/// board.
/// </summary>
public static class LoadProof
{
    /// <summary>
    /// A plan can prove load current where a nominal board's change exceeds this many of its standard uncertainties.
    /// Each reading is then judged by its own interval.
    /// </summary>
    public const double ProvingFactor = 5.0;

    /// <summary>
    /// Change from unloaded to a load of a source with the nominal values, V, without sign. In two-wire sensing the
    /// lead's drop is part of it.
    /// </summary>
    public static double NominalChangeVolt(StateJob state, Load load)
    {
        ArgumentNullException.ThrowIfNull(state);
        ArgumentNullException.ThrowIfNull(load);
        bool twoWire = state.Output.Sensing == Sensing.TwoWire;
        double lead = state.Output.LeadOhm.Value;
        double source = state.State.Nominal.InternalResistanceOhm + (twoWire ? lead : 0.0);
        double total = source + load.ResistanceOhm + load.BranchOhm.Value + (twoWire ? 0.0 : lead);
        double volt = state.State.Nominal.SourceVoltageVolt - (state.LoadReturn?.VoltageVolt.Value ?? 0.0);
        return Math.Abs(volt) * source / total;
    }

    /// <summary>
    /// Standard uncertainty of a change between two means of readings in one range, V: noise and resolution of both.
    /// Gain scales the change by parts per million and offset cancels.
    /// </summary>
    public static double ChangeUncertaintyVolt(MeterRange range, int readings)
    {
        ArgumentNullException.ThrowIfNull(range);
        double noise = range.NoiseVolt * range.NoiseVolt / readings;
        double resolution = range.ResolutionVolt * range.ResolutionVolt / 12.0;
        return Math.Sqrt(2.0 * (noise + resolution));
    }

    /// <summary>Whether a load that never came on would satisfy a limit: it shows no resistance and no droop.</summary>
    public static bool IsSatisfiedByZeroChange(QuantityLimit limit)
    {
        ArgumentNullException.ThrowIfNull(limit);
        return limit.Quantity != Quantity.SourceVoltage && limit.Holds(0.0);
    }
}
