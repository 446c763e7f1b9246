using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Addresses of one kind in a fixture file; each is used once within its owner.</summary>
/// <param name="what">What is addressed, for messages.</param>
internal sealed class AddressTable(string what)
{
    private readonly Dictionary<(string Owner, int Address), string> taken = [];

    /// <summary>Every address claimed so far.</summary>
    internal IEnumerable<(string Owner, int Address)> Claimed => taken.Keys;

    /// <summary>Takes an address where it and its owner were read well; a second use is a mistake.</summary>
    internal void Claim(MappingReader reader, string ownerKey, string owner, string key, int address)
    {
        if (reader.Bound(ownerKey, key) && !taken.TryAdd((owner, address), reader.Path))
        {
            reader.Mistake(
                key, $"{what} {address} of {ownerKey} `{owner}` is used already, by {taken[(owner, address)]}",
                "give each its own address");
        }
    }
}
