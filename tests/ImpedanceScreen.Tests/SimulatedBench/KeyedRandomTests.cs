using ImpedanceScreen.SimulatedBench.Randomness;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The generator and the draws made from it.</summary>
public sealed class KeyedRandomTests
{
    [Fact]
    public void The_generator_gives_the_published_sequence()
    {
        // First outputs of SplitMix64 for seed 1234567, as commonly published beside its code (from memory).
        SplitMix64 bits = new(1234567);
        Assert.Equal(6457827717110365317UL, bits.Next());
        Assert.Equal(3203168211198807973UL, bits.Next());
        Assert.Equal(9817491932198370423UL, bits.Next());
        Assert.Equal(4593380528125082431UL, bits.Next());
    }

    [Fact]
    public void A_key_has_its_own_sequence_whatever_was_drawn_before()
    {
        KeyedRandom once = new(7, 3, "lead", "TIDE");
        KeyedRandom again = new(7, 3, "lead", "TIDE");
        Assert.Equal(once.Normal(0.0, 1.0), again.Normal(0.0, 1.0));
        Assert.NotEqual(new KeyedRandom(7, 3, "lead", "REF").Uniform(), new KeyedRandom(7, 3, "lead", "TIDE").Uniform());
        Assert.NotEqual(new KeyedRandom(7, 4, "lead", "TIDE").Uniform(), new KeyedRandom(7, 3, "lead", "TIDE").Uniform());
        Assert.NotEqual(new KeyedRandom(8, 3, "lead", "TIDE").Uniform(), new KeyedRandom(7, 3, "lead", "TIDE").Uniform());
    }

    [Fact]
    public void First_draws_of_neighbouring_keys_are_normal_and_uncorrelated()
    {
        const int count = 20_000;
        double[] draws = [.. Enumerable.Range(0, count).Select(i => new KeyedRandom(1, i, "x").Normal(2.0, 3.0))];
        double mean = draws.Average();
        double variance = draws.Sum(draw => Math.Pow(draw - mean, 2)) / (count - 1);
        double next = draws.Zip(draws.Skip(1), (a, b) => (a - mean) * (b - mean)).Average() / variance;

        // Five standard deviations of each statistic.
        Assert.Equal(2.0, mean, 5.0 * 3.0 / Math.Sqrt(count));
        Assert.Equal(9.0, variance, 5.0 * 9.0 * Math.Sqrt(2.0 / count));
        Assert.Equal(0.0, next, 5.0 / Math.Sqrt(count));
    }
}
