namespace ImpedanceScreen.SimulatedBench.Randomness;

/// <summary>
/// Random numbers that depend on a seed and a key alone: what is drawn for a thing does not shift when other things
/// are drawn before it, more often, or later.
/// </summary>
public sealed class KeyedRandom
{
    private SplitMix64 bits;

    /// <summary>Makes the stream of a key.</summary>
    /// <param name="seed">The bench's seed.</param>
    /// <param name="number">Number within the key, as a board's ordinal.</param>
    /// <param name="key">What is drawn, in parts.</param>
    public KeyedRandom(ulong seed, long number, params ReadOnlySpan<string> key)
    {
        ulong mixed = SplitMix64.Mix(seed);
        foreach (string part in key)
        {
            mixed = SplitMix64.Mix(mixed ^ Hash(part));
        }

        bits = new SplitMix64(SplitMix64.Mix(mixed ^ unchecked((ulong)number)));
    }

    /// <summary>Uniform, at least 0 and below 1, with 53 bits.</summary>
    public double Uniform() => (bits.Next() >> 11) * (1.0 / (1UL << 53));

    /// <summary>Uniform between two bounds.</summary>
    public double Between(double min, double max) => min + ((max - min) * Uniform());

    /// <summary>Uniform within a half width about zero.</summary>
    public double Rectangular(double halfWidth) => halfWidth * ((2.0 * Uniform()) - 1.0);

    /// <summary>Normal (Box and Muller 1958).</summary>
    public double Normal(double mean, double standardDeviation)
    {
        double radius = Math.Sqrt(-2.0 * Math.Log(1.0 - Uniform()));
        return mean + (standardDeviation * radius * Math.Cos(2.0 * Math.PI * Uniform()));
    }

    // FNV-1a, 64 bits (IETF draft-eastlake-fnv): the runtime's own string hash differs from process to process.
    private static ulong Hash(string text)
    {
        ulong hash = 0xCBF29CE484222325;
        foreach (char letter in text)
        {
            hash = unchecked((hash ^ letter) * 0x100000001B3);
        }

        return hash;
    }
}
