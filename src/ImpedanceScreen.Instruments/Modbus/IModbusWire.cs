namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>How frames travel: over a serial line or over TCP. One exchange at a time.</summary>
internal interface IModbusWire : IAsyncDisposable
{
    /// <summary>Makes the request's frame, opens the link where needed, waits until the line may be used.</summary>
    /// <returns>How long the request itself takes on the line; comes on top of the allowed time for the
    /// answer.</returns>
    ValueTask<TimeSpan> PrepareAsync(byte unit, ModbusRequest request, CancellationToken cancellation);

    /// <summary>
    /// Sends the prepared frame and waits for the answer's protocol data unit, checked as far as the frame goes.
    /// </summary>
    /// <returns>Valid until the next exchange.</returns>
    ValueTask<ReadOnlyMemory<byte>> ExchangeAsync(CancellationToken cancellation);

    /// <summary>The exchange ended with an answer that belongs to its request.</summary>
    void Succeeded();

    /// <summary>The exchange ended otherwise: from here no late answer may be taken for the next one.</summary>
    /// <param name="fault">Why; null where the caller cancelled.</param>
    ValueTask FailedAsync(ModbusFault? fault);

    /// <summary>Drops the link; the next exchange opens a new one.</summary>
    ValueTask DropAsync();
}
