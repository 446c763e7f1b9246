namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// A Modbus client on one link; the link may serve several units. Methods bear the names of the standard's functions.
/// Every exchange has
/// a time-out and a bounded number of tries. Callers may come from any thread: a second one waits its turn.
/// </summary>
/// <remarks>
/// Unit addresses are 1 to 247: broadcast has no answer to check and is refused with <see
/// cref="ArgumentOutOfRangeException"/>.
/// All methods throw <see cref="ModbusException"/> when no right answer comes, and <see cref="ModbusRefusalException"/>
/// for an
/// exception reply.
/// </remarks>
public interface IModbusClient : IAsyncDisposable
{
    /// <summary>Function 01: reads 1 to 2000 coils.</summary>
    Task<bool[]> ReadCoilsAsync(byte unit, ushort address, int quantity, CancellationToken cancellation);

    /// <summary>Function 02: reads 1 to 2000 discrete inputs.</summary>
    Task<bool[]> ReadDiscreteInputsAsync(byte unit, ushort address, int quantity, CancellationToken cancellation);

    /// <summary>Function 03: reads 1 to 125 holding registers.</summary>
    Task<ushort[]> ReadHoldingRegistersAsync(byte unit, ushort address, int quantity, CancellationToken cancellation);

    /// <summary>Function 04: reads 1 to 125 input registers.</summary>
    Task<ushort[]> ReadInputRegistersAsync(byte unit, ushort address, int quantity, CancellationToken cancellation);

    /// <summary>Function 05: sets one coil.</summary>
    Task WriteSingleCoilAsync(byte unit, ushort address, bool value, CancellationToken cancellation);

    /// <summary>Function 06: sets one holding register.</summary>
    Task WriteSingleRegisterAsync(byte unit, ushort address, ushort value, CancellationToken cancellation);

    /// <summary>Function 15: sets 1 to 1968 neighbouring coils.</summary>
    Task WriteMultipleCoilsAsync(
        byte unit, ushort address, IReadOnlyList<bool> values, CancellationToken cancellation);

    /// <summary>Function 16: sets 1 to 123 neighbouring holding registers.</summary>
    Task WriteMultipleRegistersAsync(
        byte unit, ushort address, IReadOnlyList<ushort> values, CancellationToken cancellation);

    /// <summary>Drops the link; the next exchange opens a new one.</summary>
    Task ReopenAsync();
}
