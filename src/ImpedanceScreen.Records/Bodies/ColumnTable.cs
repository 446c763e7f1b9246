using System.Text.Json;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>Lists of equal length that stand side by side in a body, read row by row.</summary>
internal sealed class ColumnTable
{
    private readonly Dictionary<string, JsonElement[]> cells = new(StringComparer.Ordinal);

    /// <param name="columns">The object whose members are the lists.</param>
    /// <param name="lead">The column that says how many rows there are.</param>
    /// <exception cref="FormatException">A member is no list, or of another length.</exception>
    public ColumnTable(JsonElement columns, string lead)
    {
        foreach (JsonProperty column in columns.EnumerateObject())
        {
            cells[column.Name] = [.. column.Value.EnumerateArray()];
        }

        RequireEqualLength(lead);
    }

    /// <summary>Lists that stand in the cells of one row.</summary>
    public ColumnTable(ColumnRow row, ReadOnlySpan<string> names)
    {
        foreach (string name in names)
        {
            cells.Add(name, [.. row.Cell(name).EnumerateArray()]);
        }

        RequireEqualLength(names[0]);
    }

    private int Count { get; set; }

    public JsonElement Cell(string name, int place) => cells.TryGetValue(name, out JsonElement[]? column)
        ? column[place]
        : throw new FormatException($"Column '{name}' is missing.");

    public List<T> Rows<T>(Func<ColumnRow, T> read)
    {
        var rows = new List<T>(Count);
        for (int place = 0; place < Count; place++)
        {
            rows.Add(read(new ColumnRow(this, place)));
        }

        return rows;
    }

    private void RequireEqualLength(string lead)
    {
        Count = cells.TryGetValue(lead, out JsonElement[]? first)
            ? first.Length
            : throw new FormatException($"Column '{lead}' is missing.");
        foreach ((string name, JsonElement[] column) in cells)
        {
            if (column.Length != Count)
            {
                throw new FormatException($"Column '{name}' has {column.Length} entries where '{lead}' has {Count}.");
            }
        }
    }
}
