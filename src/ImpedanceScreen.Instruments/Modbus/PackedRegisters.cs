using System.Buffers.Binary;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Registers as Modbus sends them: two bytes each, high byte first.</summary>
internal static class PackedRegisters
{
    public static void Write(IReadOnlyList<ushort> registers, Span<byte> packed)
    {
        for (int i = 0; i < registers.Count; i++)
        {
            BinaryPrimitives.WriteUInt16BigEndian(packed[(2 * i)..], registers[i]);
        }
    }

    public static ushort[] Read(ReadOnlySpan<byte> packed)
    {
        var registers = new ushort[packed.Length / 2];
        for (int i = 0; i < registers.Length; i++)
        {
            registers[i] = BinaryPrimitives.ReadUInt16BigEndian(packed[(2 * i)..]);
        }

        return registers;
    }
}
