namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>
/// Checksum of serial frames: MODBUS over Serial Line Specification and Implementation Guide V1.02, section 2.5.1.2:
/// polynomial
/// A001 (reflected), start FFFF, low byte sent first.
/// </summary>
public static class Crc16
{
    private static readonly ushort[] Table = MakeTable();

    /// <summary>The checksum of some bytes; 0 over a frame that ends with its own checksum.</summary>
    public static ushort Of(ReadOnlySpan<byte> bytes)
    {
        ushort crc = 0xFFFF;
        foreach (byte b in bytes)
        {
            crc = (ushort)((crc >> 8) ^ Table[(crc ^ b) & 0xFF]);
        }

        return crc;
    }

    private static ushort[] MakeTable()
    {
        var table = new ushort[256];
        for (int i = 0; i < table.Length; i++)
        {
            int crc = i;
            for (int bit = 0; bit < 8; bit++)
            {
                crc = (crc & 1) != 0 ? (crc >> 1) ^ 0xA001 : crc >> 1;
            }

            table[i] = (ushort)crc;
        }

        return table;
    }
}
