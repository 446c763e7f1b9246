using ImpedanceScreen.Fixtures;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>Opens sockets and serial ports.</summary>
/// <param name="time">Clock.</param>
/// <param name="log">Log.</param>
public sealed class ChannelFactory(TimeProvider time, ILogger log) : IChannelFactory
{
    /// <inheritdoc/>
    public async Task<IByteChannel> OpenAsync(Link link, CancellationToken cancellation) => link switch
    {
        TcpLink tcp => await TcpChannel.ConnectAsync(tcp, cancellation),
        SerialLink serial => SerialChannel.Open(serial, time, log),
        _ => throw new ArgumentException($"Link '{link.Name}' is of no known kind.", nameof(link)),
    };
}
