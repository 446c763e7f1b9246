using System.IO.Ports;
using ImpedanceScreen.Fixtures;
using Microsoft.Extensions.Logging;

namespace ImpedanceScreen.Instruments.Channels;

/// <summary>
/// A channel over one serial port. Modem lines are never touched (a pseudo-terminal has none and throws), reads go
/// through the
/// stream with a token (its own time-outs are ignored by asynchronous reads), and nothing is written after a failure: a
/// second
/// failed write would lock up the disposal of the port.
/// </summary>
public sealed class SerialChannel : IByteChannel
{
    private static readonly TimeSpan DisposalLimit = TimeSpan.FromSeconds(1);

    private readonly SerialPort port;
    private readonly Stream stream;
    private readonly FileStream deviceLock;
    private readonly SerialLink link;
    private readonly TimeProvider time;
    private readonly ILogger log;
    private int disposed;

    private SerialChannel(SerialPort port, FileStream deviceLock, SerialLink link, TimeProvider time, ILogger log)
    {
        this.port = port;
        stream = port.BaseStream;
        this.deviceLock = deviceLock;
        this.link = link;
        this.time = time;
        this.log = log;
    }

    /// <inheritdoc/>
    public bool IsDead { get; private set; }

    /// <summary>Locks and opens a port.</summary>
    /// <exception cref="LinkLostException">The port is missing, in use or not accessible.</exception>
    public static SerialChannel Open(SerialLink link, TimeProvider time, ILogger log)
    {
        ArgumentNullException.ThrowIfNull(link);
        FileStream locked = DeviceLock.Take(link);
        var opened = new SerialPort(
            link.Device, link.BaudRate, ParityOf(link.Parity), 8, link.StopBits == 2 ? StopBits.Two : StopBits.One);
        try
        {
            opened.Open();
            opened.DiscardInBuffer();
            return new SerialChannel(opened, locked, link, time, log);
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or ArgumentException
            or InvalidOperationException)
        {
            opened.Dispose();
            locked.Dispose();

            // The outer exception of a refused port says only that access is denied.
            string why = e.InnerException is { } inner ? $"{e.Message} {inner.Message}" : e.Message;
            throw new LinkLostException(
                $"Link '{link.Name}': serial port {link.Device} does not open ({why}). "
                + "Look at the adapter's cable and the port's name.",
                e);
        }
    }

    /// <inheritdoc/>
    public async ValueTask<int> ReadAsync(Memory<byte> buffer, CancellationToken cancellation)
    {
        ThrowIfDead();
        try
        {
            int count = await stream.ReadAsync(buffer, cancellation);
            return count > 0 ? count : throw Lost(null);
        }
        catch (Exception e) when (IsFailure(e))
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
            await stream.WriteAsync(bytes, cancellation);
        }
        catch (Exception e) when (IsFailure(e))
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
        try
        {
            port.DiscardInBuffer();
        }
        catch (Exception e) when (IsFailure(e))
        {
            throw Lost(e);
        }
    }

    /// <summary>
    /// Closes the port once, off the caller's thread: the runtime may lock up on a port whose far end is gone.
    /// </summary>
    public async ValueTask DisposeAsync()
    {
        if (Interlocked.Exchange(ref disposed, 1) == 1)
        {
            return;
        }

        IsDead = true;
        try
        {
            await Task.Run(port.Dispose).WaitAsync(DisposalLimit, time);
        }
        catch (TimeoutException)
        {
            log.LogError(
                "Link {Link}: serial port {Device} did not close within {Limit}; it is abandoned.",
                link.Name, link.Device, DisposalLimit);
        }
        catch (Exception e) when (IsFailure(e))
        {
            log.LogWarning(e, "Link {Link}: serial port {Device} closed with an error.", link.Name, link.Device);
        }
        finally
        {
            await deviceLock.DisposeAsync();
        }
    }

    private static bool IsFailure(Exception e) => e is IOException or ObjectDisposedException
        or InvalidOperationException or UnauthorizedAccessException or TimeoutException;

    private static Parity ParityOf(LineParity parity) => parity switch
    {
        LineParity.Even => Parity.Even,
        LineParity.Odd => Parity.Odd,
        _ => Parity.None,
    };

    private void ThrowIfDead()
    {
        if (IsDead)
        {
            throw new LinkLostException($"Link '{link.Name}' ({link.Device}) is closed.");
        }
    }

    private LinkLostException Lost(Exception? cause)
    {
        IsDead = true;
        string why = cause?.Message ?? "the far end hung up";
        return new LinkLostException(
            $"Link '{link.Name}' ({link.Device}) is lost: {why}. Look at the adapter's cable.", cause);
    }
}
