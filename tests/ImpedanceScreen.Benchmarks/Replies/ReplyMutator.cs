using System.Buffers.Binary;
using System.Text;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Benchmarks.Replies;

/// <summary>Makes replies that are right, nearly right or noise.</summary>
internal sealed class ReplyMutator(Random random)
{
    private static readonly string[] Lines =
    [
        "+1.23456789E+01", "-4.7E-03", "0", "+9.90000000E+37", "9.91E37", "1E400", "EXAMPLE,VOLTMETER,1234,1.0",
        "+0,\"No error\"", "-113,\"Undefined header\"", "-222,\"Data out of range;VOLT:RANG 2000\"", "", "\r\r",
    ];

    /// <summary>A request of any function, and a reply to it.</summary>
    public (ModbusRequest Request, byte[] Pdu) Modbus()
    {
        ushort address = (ushort)random.Next(0, 60000);
        var pdu = new byte[ModbusLimits.PduLength];
        ModbusRequest request;
        int length;
        switch (random.Next(6))
        {
            case 0:
                var bits = new ReadBits((ModbusFunction)random.Next(1, 3), address, random.Next(1, 2001));
                (request, length) = (bits, bits.WriteAnswer(Bits(bits.Quantity), pdu));
                break;
            case 1:
                var registers = new ReadRegisters((ModbusFunction)random.Next(3, 5), address, random.Next(1, 126));
                (request, length) = (registers, registers.WriteAnswer(new ushort[registers.Quantity], pdu));
                break;
            case 2:
                (request, length) = Answered(new WriteSingleCoil(address, random.Next(2) == 0), pdu);
                break;
            case 3:
                (request, length) = Answered(new WriteSingleRegister(address, (ushort)random.Next(65536)), pdu);
                break;
            case 4:
                (request, length) = Answered(new WriteMultipleCoils(address, Bits(random.Next(1, 1969))), pdu);
                break;
            default:
                (request, length) =
                    Answered(new WriteMultipleRegisters(address, new ushort[random.Next(1, 124)]), pdu);
                break;
        }

        if (random.Next(8) == 0)
        {
            length = new ModbusRefusalException(request.Function, (ModbusExceptionCode)random.Next(256)).Write(pdu);
        }

        return (request, random.Next(2) == 0 ? pdu[..length] : Mutate(pdu[..length]));
    }

    /// <summary>A serial frame around a reply.</summary>
    public byte[] Rtu(byte unit, byte[] pdu)
    {
        var frame = new byte[pdu.Length + 3];
        frame[0] = unit;
        pdu.CopyTo(frame, 1);
        ushort crc = Crc16.Of(frame.AsSpan(0, pdu.Length + 1));
        BinaryPrimitives.WriteUInt16LittleEndian(frame.AsSpan(pdu.Length + 1), crc);
        return random.Next(2) == 0 ? frame : Mutate(frame);
    }

    /// <summary>A TCP frame around a reply.</summary>
    public byte[] Tcp(ushort transaction, byte unit, byte[] pdu)
    {
        var frame = new byte[MbapHeader.Length + pdu.Length];
        new MbapHeader(transaction, unit, pdu.Length).Write(frame);
        pdu.CopyTo(frame, MbapHeader.Length);
        return random.Next(2) == 0 ? frame : Mutate(frame);
    }

    /// <summary>A line of a SCPI instrument.</summary>
    public byte[] Line()
    {
        byte[] line = Encoding.ASCII.GetBytes(Lines[random.Next(Lines.Length)] + "\n");
        return random.Next(3) == 0 ? line : Mutate(line);
    }

    private bool[] Bits(int count)
    {
        var bits = new bool[count];
        bits[random.Next(count)] = true;
        return bits;
    }

    private static (ModbusRequest Request, int Length) Answered(ModbusWriteRequest request, byte[] pdu) =>
        (request, request.WriteAnswer(pdu));

    private byte[] Mutate(byte[] reply)
    {
        byte[] changed = [.. reply];
        for (int changes = random.Next(1, 4); changes > 0; changes--)
        {
            int at = random.Next(changed.Length + 1);
            switch (random.Next(6))
            {
                case 0 when at < changed.Length:
                    changed[at] ^= (byte)(1 << random.Next(8));
                    break;
                case 1 when at < changed.Length:
                    changed[at] = (byte)random.Next(256);
                    break;
                case 2:
                    changed = changed[..at];
                    break;
                case 3:
                    changed = [.. changed, .. Noise(random.Next(1, 40))];
                    break;
                case 4:
                    changed = [.. changed[..at], .. changed];
                    break;
                default:
                    changed = Noise(random.Next(0, 600));
                    break;
            }
        }

        return changed;
    }

    private byte[] Noise(int length)
    {
        var noise = new byte[length];
        random.NextBytes(noise);
        return noise;
    }
}
