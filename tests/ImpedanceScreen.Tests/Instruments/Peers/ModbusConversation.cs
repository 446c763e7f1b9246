using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Tests.Instruments.Peers;

/// <summary>
/// All eight functions and the exception replies, with a peer that starts with the values of <see
/// cref="RegisterBank"/>.
/// </summary>
internal static class ModbusConversation
{
    private const byte Unit = ModbusPeer.Unit;

    public static async Task HoldAsync(IModbusClient client, CancellationToken cancellation)
    {
        Assert.Equal(
            Enumerable.Range(3, 20).Select(RegisterBank.InitialCoil),
            await client.ReadCoilsAsync(Unit, 3, 20, cancellation));
        Assert.Equal(
            Enumerable.Range(0, 100).Select(RegisterBank.InitialInput),
            await client.ReadDiscreteInputsAsync(Unit, 0, 100, cancellation));
        Assert.Equal(
            Enumerable.Range(50, 50).Select(RegisterBank.InitialHolding),
            await client.ReadHoldingRegistersAsync(Unit, 50, 50, cancellation));
        ushort[] input = await client.ReadInputRegistersAsync(Unit, 7, 1, cancellation);
        Assert.Equal([RegisterBank.InitialInputRegister(7)], input);

        await client.WriteSingleCoilAsync(Unit, 10, value: true, cancellation);
        await client.WriteSingleCoilAsync(Unit, 11, value: false, cancellation);
        bool[] written = [true, false, false];
        Assert.Equal(written, await client.ReadCoilsAsync(Unit, 10, 3, cancellation));
        await client.WriteSingleRegisterAsync(Unit, 20, 0xBEEF, cancellation);
        Assert.Equal([0xBEEF, 1021], await client.ReadHoldingRegistersAsync(Unit, 20, 2, cancellation));

        bool[] coils = [true, true, false, false, true, true, false, true, true, false, true];
        await client.WriteMultipleCoilsAsync(Unit, 30, coils, cancellation);
        Assert.Equal(coils, await client.ReadCoilsAsync(Unit, 30, coils.Length, cancellation));
        ushort[] registers = [1, 0xFFFF, 0, 0x8000];
        await client.WriteMultipleRegistersAsync(Unit, 40, registers, cancellation);
        Assert.Equal(registers, await client.ReadHoldingRegistersAsync(Unit, 40, registers.Length, cancellation));

        await RefusedAsync(() => client.ReadCoilsAsync(Unit, 99, 2, cancellation));
        await RefusedAsync(() => client.ReadInputRegistersAsync(Unit, 100, 1, cancellation));
        await RefusedAsync(() => client.WriteSingleRegisterAsync(Unit, 200, 1, cancellation));
        await RefusedAsync(() => client.WriteMultipleCoilsAsync(Unit, 95, coils, cancellation));
        ushort[] next = await client.ReadHoldingRegistersAsync(Unit, 8, 1, cancellation);
        Assert.Equal([RegisterBank.InitialHolding(8)], next);
    }

    private static async Task RefusedAsync(Func<Task> exchange)
    {
        ModbusRefusalException refusal = await Assert.ThrowsAsync<ModbusRefusalException>(exchange);
        Assert.Equal(ModbusExceptionCode.IllegalDataAddress, refusal.Code);
    }
}
