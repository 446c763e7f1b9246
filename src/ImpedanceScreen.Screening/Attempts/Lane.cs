using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Timing;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>
/// The drive states of the outputs that share a load bank or a group, one after another: no two of them are ever
/// loaded at once. Lanes are loaded beside one another.
/// </summary>
internal sealed class Lane(IEnumerable<StateJob> states, int testsPerBoard)
{
    private readonly Queue<StateJob> waiting = new(states);
    private List<LoadPointReadings> taken = [];

    /// <summary>The state being measured; null before the first and after the last.</summary>
    public StateJob? State { get; private set; }

    /// <summary>What the planner wants now for <see cref="State"/>.</summary>
    public PlanStep.Measure? Wanted { get; private set; }

    /// <summary>Relays that this lane holds closed besides load and sense.</summary>
    public IReadOnlyList<Relay> Path { get; set; } = [];

    /// <summary>The load that is closed.</summary>
    public Load? Closed { get; set; }

    /// <summary>When the contacts switched last are at rest.</summary>
    public Deadline AtRest { get; set; }

    /// <summary>When the load point has settled.</summary>
    public Deadline Settled { get; set; }

    /// <summary>Moves to the next state, if any.</summary>
    public bool TakeNextState()
    {
        taken = [];
        State = waiting.TryDequeue(out StateJob? next) ? next : null;
        Ask();
        return State is not null;
    }

    /// <summary>Adds readings and asks the planner for the next step.</summary>
    public void Add(LoadPointReadings readings)
    {
        taken.Add(readings);
        Ask();
    }

    /// <summary>The readings of <see cref="State"/> so far.</summary>
    public IReadOnlyList<LoadPointReadings> Taken => taken;

    private void Ask() => Wanted = State is null ? null : FixedPlan.Next(State, taken, testsPerBoard) as PlanStep.Measure;
}
