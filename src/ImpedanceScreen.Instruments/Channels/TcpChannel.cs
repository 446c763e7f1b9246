using System.Net.Sockets;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>A channel over one TCP connection.</summary>
public sealed class TcpChannel : IByteChannel
{
    private readonly Socket socket;
    private readonly string name;

    /// <summary>Takes over a connected socket.</summary>
    /// <param name="socket">The socket; disposed of with the channel.</param>
    /// <param name="name">What messages call the link.</param>
    public TcpChannel(Socket socket, string name)
    {
        ArgumentNullException.ThrowIfNull(socket);
        this.socket = socket;
        this.name = name;

        // Requests are small and wait for their answers: never held back for more bytes to come.
        socket.NoDelay = true;
    }

    /// <inheritdoc/>
    public bool IsDead { get; private set; }

    /// <summary>Connects.</summary>
    /// <exception cref="LinkLostException">Nobody answers there.</exception>
    public static async Task<TcpChannel> ConnectAsync(TcpLink link, CancellationToken cancellation)
    {
        ArgumentNullException.ThrowIfNull(link);
        var connecting = new Socket(SocketType.Stream, ProtocolType.Tcp);
        try
        {
            await connecting.ConnectAsync(link.Host, link.Port, cancellation);
            return new TcpChannel(connecting, $"'{link.Name}' ({link.Host}:{link.Port})");
        }
        catch (Exception e) when (e is SocketException or OperationCanceledException)
        {
            connecting.Dispose();
            if (e is OperationCanceledException)
            {
                throw;
            }

            throw new LinkLostException(
                $"Link '{link.Name}': no connection to {link.Host}:{link.Port} ({e.Message}). "
                + "Look at power, network cable and address.",
                e);
        }
    }

    /// <inheritdoc/>
    public async ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellation)
    {
        ThrowIfDead();
        try
        {
            int count = await socket.ReceiveAsync(buffer, SocketFlags.None, cancellation);
            return count > 0 ? count : throw Lost(null);
        }
        catch (Exception e) when (e is SocketException or ObjectDisposedException)
        {
            throw Lost(e);
        }
    }

    /// <inheritdoc/>
    public async ValueTask WriteAsync(ReadOnlyMemory<byte> bytes, CancellationToken cancellation)
    {
        ThrowIfDead();
        try
        {
            // On a stream socket the runtime goes on until all bytes are taken.
            await socket.SendAsync(bytes, SocketFlags.None, cancellation);
        }
        catch (Exception e) when (e is SocketException or ObjectDisposedException)
        {
            throw Lost(e);
        }
        catch (OperationCanceledException)
        {
            IsDead = true;
            throw;
        }
    }

    /// <inheritdoc/>
    public void DiscardReceived()
    {
        ThrowIfDead();
        Span<byte> scratch = stackalloc byte[256];
        try
        {
            while (socket.Available > 0)
            {
                socket.Receive(scratch);
            }
        }
        catch (Exception e) when (e is SocketException or ObjectDisposedException)
        {
            throw Lost(e);
        }
    }

    /// <inheritdoc/>
    public ValueTask DisposeAsync()
    {
        IsDead = true;
        socket.Dispose();
        return ValueTask.CompletedTask;
    }

    private void ThrowIfDead()
    {
        if (IsDead)
        {
            throw new LinkLostException($"Link {name} is closed.");
        }
    }

    private LinkLostException Lost(Exception? cause)
    {
        IsDead = true;
        string why = cause is null ? "the far end closed the connection" : cause.Message;
        return new LinkLostException($"Link {name} is lost: {why}. Look at power and network cable.", cause);
    }
}
