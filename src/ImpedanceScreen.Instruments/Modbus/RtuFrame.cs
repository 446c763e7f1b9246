using System.Buffers.Binary;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// A frame on a serial line: unit address, protocol data unit, checksum (MODBUS over Serial Line V1.02 section 2.5.1).
/// Where a frame ends is known
/// from its first bytes; nothing is guessed from pauses.
/// </summary>
public static class RtuFrame
{
    /// <summary>Length of a frame that cannot be known: no function in use.</summary>
    public const int LengthUnknown = -1;

    /// <summary>Length of a frame whose first bytes do not tell it yet.</summary>
    public const int LengthPending = 0;

    internal const int Overhead = 3;
    private const int CheckedLength = 2;

    /// <summary>Writes a frame.</summary>
    /// <param name="unit">Unit address.</param>
    /// <param name="pdu">Protocol data unit.</param>
    /// <param name="frame">Where to; <see cref="ModbusLimits.RtuFrameLength"/> bytes suffice.</param>
    /// <returns>Its length, bytes.</returns>
    public static int Write(byte unit, ReadOnlySpan<byte> pdu, Span<byte> frame)
    {
        frame[0] = unit;
        pdu.CopyTo(frame[1..]);
        return Seal(frame, pdu.Length);
    }

    /// <summary>Whether a whole frame's checksum is right.</summary>
    public static bool IsIntact(ReadOnlySpan<byte> frame) => frame.Length > Overhead && Crc16.Of(frame) == 0;

    /// <summary>The protocol data unit of a whole frame.</summary>
    public static ReadOnlySpan<byte> Pdu(ReadOnlySpan<byte> frame) => frame[1..^CheckedLength];

    /// <summary>Length of the request frame that begins with these bytes, or a reason why it is not known.</summary>
    public static int RequestLength(ReadOnlySpan<byte> start)
    {
        if (start.Length < 2)
        {
            return LengthPending;
        }

        switch ((ModbusFunction)start[1])
        {
            case >= ModbusFunction.ReadCoils and <= ModbusFunction.WriteSingleRegister:
                return 8;
            case ModbusFunction.WriteMultipleCoils or ModbusFunction.WriteMultipleRegisters:
                return start.Length < 7 ? LengthPending : 7 + start[6] + CheckedLength;
            default:
                return LengthUnknown;
        }
    }

    /// <summary>Length of the answer frame that begins with these bytes, or a reason why it is not known.</summary>
    public static int AnswerLength(ReadOnlySpan<byte> start)
    {
        if (start.Length < 2)
        {
            return LengthPending;
        }

        if ((start[1] & ModbusRefusalException.Flag) != 0)
        {
            return Overhead + ModbusRefusalException.PduLength;
        }

        switch ((ModbusFunction)start[1])
        {
            case >= ModbusFunction.ReadCoils and <= ModbusFunction.ReadInputRegisters:
                return start.Length < 3 ? LengthPending : 3 + start[2] + CheckedLength;
            case ModbusFunction.WriteSingleCoil or ModbusFunction.WriteSingleRegister
                or ModbusFunction.WriteMultipleCoils or ModbusFunction.WriteMultipleRegisters:
                return 8;
            default:
                return LengthUnknown;
        }
    }

    /// <summary>Adds the checksum behind a unit address and a protocol data unit that are in place.</summary>
    internal static int Seal(Span<byte> frame, int pduLength)
    {
        int length = 1 + pduLength;
        BinaryPrimitives.WriteUInt16LittleEndian(frame[length..], Crc16.Of(frame[..length]));
        return length + CheckedLength;
    }
}
