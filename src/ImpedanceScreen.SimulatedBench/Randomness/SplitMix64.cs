namespace ImpedanceScreen.SimulatedBench.Randomness;

/// <summary>
/// The 64-bit generator of G. L. Steele, D. Lea, C. H. Flood, "Fast splittable pseudorandom number generators",
/// OOPSLA 2014, with the constants of its published reference code. Its state is a counter, so that a stream can be
/// made for any key without drawing the streams before it.
/// </summary>
/// <param name="state">Where the counter begins.</param>
public struct SplitMix64(ulong state)
{
    private const ulong Step = 0x9E3779B97F4A7C15;
    private ulong state = state;

    /// <summary>The next 64 bits.</summary>
    public ulong Next()
    {
        state = unchecked(state + Step);
        return Mix(state);
    }

    /// <summary>Spreads the bits of one number over 64 others.</summary>
    public static ulong Mix(ulong value)
    {
        unchecked
        {
            value = (value ^ (value >> 30)) * 0xBF58476D1CE4E5B9;
            value = (value ^ (value >> 27)) * 0x94D049BB133111EB;
            return value ^ (value >> 31);
        }
    }
}
