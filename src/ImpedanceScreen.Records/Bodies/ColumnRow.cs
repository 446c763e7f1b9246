using System.Text.Json;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>One row of a <see cref="ColumnTable"/>.</summary>
internal readonly struct ColumnRow(ColumnTable table, int place)
{
    public JsonElement Cell(string name) => table.Cell(name, place);

    public bool IsNull(string name) => Cell(name).ValueKind == JsonValueKind.Null;

    public string? OptionalText(string name) => Cell(name).GetString();

    public string Text(string name) => OptionalText(name) ?? throw new FormatException($"An entry of '{name}' is null.");

    public int Integer(string name) => Cell(name).GetInt32();

    public double Number(string name) => Cell(name).NumberOrNaN();

    public double? OptionalNumber(string name) => IsNull(name) ? null : Cell(name).GetDouble();

    public bool Truth(string name) => Cell(name).GetBoolean();

    public bool? OptionalTruth(string name) => IsNull(name) ? null : Cell(name).GetBoolean();

    public T Word<T>(string name)
        where T : struct, Enum => Words<T>.Parse(Text(name));

    /// <summary>The lists in some cells of this row, as a table of their own.</summary>
    public ColumnTable Within(params ReadOnlySpan<string> names) => new(this, names);
}
