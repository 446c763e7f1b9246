using System.Buffers.Binary;
using System.Runtime.InteropServices;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// The header ahead of a protocol data unit over TCP, MODBUS Messaging on TCP/IP Implementation Guide V1.0b section
/// 3.1.3.
/// </summary>
/// <param name="Transaction">Transaction identifier, copied into the answer.</param>
/// <param name="Unit">Unit address.</param>
/// <param name="PduLength">Length of the protocol data unit that follows, 1 to 253 bytes.</param>
[StructLayout(LayoutKind.Auto)]
public readonly record struct MbapHeader(ushort Transaction, byte Unit, int PduLength)
{
    /// <summary>Length of the header itself, bytes.</summary>
    public const int Length = 7;

    /// <summary>Writes the header.</summary>
    public void Write(Span<byte> frame)
    {
        BinaryPrimitives.WriteUInt16BigEndian(frame, Transaction);
        BinaryPrimitives.WriteUInt16BigEndian(frame[2..], 0);

        // The length counts the unit address too.
        BinaryPrimitives.WriteUInt16BigEndian(frame[4..], (ushort)(PduLength + 1));
        frame[6] = Unit;
    }

    /// <summary>Reads a header.</summary>
    /// <param name="frame">At least <see cref="Length"/> bytes.</param>
    /// <param name="header">The header.</param>
    /// <returns>False where it is none: another protocol, or a length that no frame has.</returns>
    public static bool TryRead(ReadOnlySpan<byte> frame, out MbapHeader header)
    {
        int length = BinaryPrimitives.ReadUInt16BigEndian(frame[4..]) - 1;
        header = new(BinaryPrimitives.ReadUInt16BigEndian(frame), frame[6], length);
        return BinaryPrimitives.ReadUInt16BigEndian(frame[2..]) == 0 && length is >= 1 and <= ModbusLimits.PduLength;
    }
}
