namespace ImpedanceScreen.Records.Sealing;

/// <summary>
/// CRC-32 as of IEEE 802.3 (reflected polynomial 0xEDB88320): finds a damaged disk block before anything is unpacked.
/// </summary>
internal static class Crc32
{
    private static readonly uint[] Table = MakeTable();

    public static uint Of(ReadOnlySpan<byte> bytes)
    {
        uint crc = uint.MaxValue;
        foreach (byte value in bytes)
        {
            crc = (crc >> 8) ^ Table[(byte)crc ^ value];
        }

        return ~crc;
    }

    private static uint[] MakeTable()
    {
        var table = new uint[256];
        for (uint at = 0; at < table.Length; at++)
        {
            uint entry = at;
            for (int bit = 0; bit < 8; bit++)
            {
                entry = (entry & 1) == 0 ? entry >> 1 : (entry >> 1) ^ 0xEDB88320u;
            }

            table[at] = entry;
        }

        return table;
    }
}
