using System.Runtime.InteropServices;

namespace ImpedanceScreen.Fixtures;

/// <summary>Neighbouring addresses that one exchange reads or writes.</summary>
/// <param name="First">First address.</param>
/// <param name="Count">How many.</param>
[StructLayout(LayoutKind.Auto)]
public readonly record struct AddressSpan(ushort First, int Count)
{
    /// <summary>
    /// Reading over a few addresses that nobody declared saves an exchange; a unit's banks lie farther apart.
    /// </summary>
    public const int ReadGapMost = 16;

    /// <summary>Last address.</summary>
    public int Last => First + Count - 1;

    /// <summary>
    /// The fewest spans that hold all addresses. A gap of foreign addresses is bridged up to a length: 0 for writes, so
    /// that nothing foreign is ever written.
    /// </summary>
    /// <param name="addresses">Addresses in any order.</param>
    /// <param name="gapMost">Longest gap that is bridged.</param>
    /// <param name="countMost">Most addresses in one exchange.</param>
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
