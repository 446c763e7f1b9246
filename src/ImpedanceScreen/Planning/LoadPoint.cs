using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Planning;

/// <summary>What is read: the output or its load return, on which load.</summary>
public enum Sensed
{
    /// <summary>The output itself.</summary>
    Output,

    /// <summary>The rail that loads return to, read as a reading of its own.</summary>
    LoadReturn,
}

/// <summary>One output in one drive state on one load: where readings are taken.</summary>
/// <param name="Load">The load; null for unloaded.</param>
/// <param name="Sensed">What the meter reads.</param>
public sealed record LoadPoint(Load? Load, Sensed Sensed = Sensed.Output);

/// <summary>Readings taken at one load point, in the order in which they were taken.</summary>
/// <param name="Point">The load point.</param>
/// <param name="ContactProved">True where the load relay's mirror contact read closed, false where it read open, null
/// where it is not wired or there is no load.</param>
/// <param name="Readings">The readings.</param>
public sealed record LoadPointReadings(LoadPoint Point, bool? ContactProved, IReadOnlyList<Bench.MeterReading> Readings);

/// <summary>What the planner wants next for one output in one drive state.</summary>
public abstract record PlanStep
{
    /// <summary>Take readings at a load point.</summary>
    /// <param name="Point">Where.</param>
    /// <param name="Count">How many.</param>
    public sealed record Measure(LoadPoint Point, int Count) : PlanStep;

    /// <summary>No further load point.</summary>
    /// <param name="Reason">Why.</param>
    public sealed record Stop(StopReason Reason) : PlanStep;
}

/// <summary>Why a loading plan ended.</summary>
public enum StopReason
{
    /// <summary>All load points of the plan were read.</summary>
    PlanComplete,

    /// <summary>The unloaded reading lies outside its window: no load may close.</summary>
    UnloadedOutsideWindow,

    /// <summary>The rail that the loads return to is not at its stated voltage: no load may close.</summary>
    ReturnNotAsStated,

    /// <summary>The output began to limit: no heavier load is tried.</summary>
    Limiting,

    /// <summary>The meter was overloaded or gave no number.</summary>
    NoReading,

    /// <summary>A load relay's mirror contact contradicts its coil.</summary>
    ContactContradicted,
}
