using ImpedanceScreen.Benchmarks.Replies;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>Replies that are right, nearly right or noise.</summary>
[Collection(RealTime.Name)]
public sealed class MutatedReplyTests
{
    [Theory]
    [InlineData(1)]
    [InlineData(2)]
    public async Task Of_ten_thousand_replies_none_hangs_or_throws_anything_but_typed_errors(ulong seed)
    {
        ReplyRun run = new(10_000, seed);
        await run.RunAsync(CancellationToken.None);
        Assert.Null(run.Failure);
        Assert.Equal(10_000, run.Done);

        // Both ends of the scale are met, else the mutations would prove nothing.
        Assert.InRange(run.Answers, 1_000, 9_000);
    }
}
