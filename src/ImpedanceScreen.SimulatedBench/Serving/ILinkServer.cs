using ImpedanceScreen.Instruments.Channels;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>The far end of a link: answers what comes over a channel until the channel dies.</summary>
internal interface ILinkServer
{
    /// <summary>Serves one channel.</summary>
    /// <exception cref="LinkLostException">The channel is dead.</exception>
    /// <exception cref="OperationCanceledException">The bench ends.</exception>
    Task ServeAsync(IByteChannel channel, CancellationToken cancellation);
}
