using ImpedanceScreen.Files;

namespace ImpedanceScreen.Fixtures;

/// <summary>Addresses of one kind on the relay units of a fixture file; each is used once.</summary>
/// <param name="what">What is addressed, for messages.</param>
internal sealed class AddressTable(string what)
{
    private readonly Dictionary<(string Unit, int Address), string> taken = [];

    /// <summary>Every address claimed so far.</summary>
    internal IEnumerable<(string Unit, int Address)> Claimed => taken.Keys;

    /// <summary>Takes an address where unit and address were read well; a second use is a mistake.</summary>
    internal void Claim(MappingReader reader, string key, string unit, int address)
    {
        if (reader.Bound("unit", key) && !taken.TryAdd((unit, address), reader.Path))
        {
            reader.Mistake(
                key, $"{what} {address} of unit `{unit}` is used already, by {taken[(unit, address)]}",
                "give each its own address");
        }
    }
}
