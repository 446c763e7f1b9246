using System.Runtime.InteropServices;

namespace ImpedanceScreen.Instruments.Relays;

/// <summary>Neighbouring addresses that one exchange reads or writes.</summary>
/// <param name="First">First address.</param>
/// <param name="Count">How many.</param>
[StructLayout(LayoutKind.Auto)]
internal readonly record struct AddressSpan(ushort First, int Count)
{
    public int Last => First + Count - 1;

    /// <summary>
    /// The fewest spans that hold all addresses. A gap of up to <paramref name="gapMost"/> foreign addresses is
    /// bridged: 0 for writes, so that
    /// nothing foreign is ever written.
    /// </summary>
    public static IReadOnlyList<AddressSpan> Cover(IEnumerable<ushort> addresses, int gapMost, int countMost)
    {
        List<AddressSpan> spans = [];
        foreach (ushort address in addresses.Distinct().Order())
        {
            if (spans.Count > 0 && address - spans[^1].Last - 1 <= gapMost && address - spans[^1].First < countMost)
            {
                spans[^1] = new(spans[^1].First, address - spans[^1].First + 1);
            }
            else
            {
                spans.Add(new(address, 1));
            }
        }

        return spans;
    }
}
