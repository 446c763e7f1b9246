namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Bits as Modbus packs them: eight a byte, lowest address in the lowest bit, unused bits zero.</summary>
internal static class PackedBits
{
    public static int Length(int count) => (count + 7) / 8;

    public static void Write(IReadOnlyList<bool> bits, Span<byte> packed)
    {
        packed[..Length(bits.Count)].Clear();
        for (int i = 0; i < bits.Count; i++)
        {
            if (bits[i])
            {
                packed[i / 8] |= (byte)(1 << (i % 8));
            }
        }
    }

    public static bool[] Read(ReadOnlySpan<byte> packed, int count)
    {
        var bits = new bool[count];
        for (int i = 0; i < count; i++)
        {
            bits[i] = (packed[i / 8] & (1 << (i % 8))) != 0;
        }

        return bits;
    }
}
