using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>Opens channels for the links of a fixture file.</summary>
public interface IChannelFactory
{
    /// <summary>Opens a channel.</summary>
    /// <exception cref="LinkLostException">It cannot be opened.</exception>
    /// <exception cref="OperationCanceledException">The caller cancelled.</exception>
    Task<IByteChannel> OpenAsync(Link link, CancellationToken cancellation);
}
