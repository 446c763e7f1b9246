using System.Runtime.InteropServices;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench.Randomness;

namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>The normally-open contact of one relay: follows its coil late, and bounces when it closes.</summary>
internal sealed class Contact(Relay relay, RelayUnit unit, ulong seed)
{
    private const int BouncesMost = 3;
    private int switchings;

    public Relay Relay => relay;

    public bool IsClosed { get; set; }

    /// <summary>Whether the coil is energised.</summary>
    public bool IsDriven { get; private set; }

    /// <summary>Rises with each switching, so that what an older one had planned is not carried out.</summary>
    public int Generation => switchings;

    /// <summary>What the contact will do from now on, in seconds after this switching.</summary>
    public IReadOnlyList<ContactMove> Drive(bool on)
    {
        IsDriven = on;
        switchings++;
        var random = new KeyedRandom(seed, switchings, "contact", relay.Unit, $"{relay.Coil}");
        return on ? Operate(random, unit.Operate.TotalSeconds) : Release(random, unit.Release.TotalSeconds);
    }

    // Everything lies within the declared time, which is the longest.
    private static List<ContactMove> Operate(KeyedRandom random, double longestSeconds)
    {
        double at = random.Between(0.4, 0.65) * longestSeconds;
        List<ContactMove> moves = [new(at, true)];
        int bounces = (int)(random.Uniform() * (BouncesMost + 1));
        for (int i = 0; i < bounces; i++)
        {
            at += random.Between(0.02, 0.04) * longestSeconds;
            moves.Add(new(at, false));
            at += random.Between(0.02, 0.06) * longestSeconds;
            moves.Add(new(at, true));
        }

        return moves;
    }

    private static List<ContactMove> Release(KeyedRandom random, double longestSeconds) =>
        [new(random.Between(0.3, 0.9) * longestSeconds, false)];
}

/// <summary>One move of a contact.</summary>
/// <param name="AfterSeconds">When, s after the switching.</param>
/// <param name="Closes">Whether it closes or opens.</param>
[StructLayout(LayoutKind.Auto)]
internal readonly record struct ContactMove(double AfterSeconds, bool Closes);
