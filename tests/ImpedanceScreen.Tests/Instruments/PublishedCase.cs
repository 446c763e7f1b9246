using System.Text.Json;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>A case of a file of published values in <c>Data</c>.</summary>
internal static class PublishedCase
{
    public static JsonElement Read(string file, string id)
    {
        string path = Path.Combine(AppContext.BaseDirectory, "Instruments", "Data", file);
        using JsonDocument document = JsonDocument.Parse(File.ReadAllText(path));
        return document.RootElement.GetProperty("cases").EnumerateArray()
            .Single(each => each.GetProperty("id").GetString() == id).Clone();
    }

    public static string Text(this JsonElement element, string property) =>
        element.GetProperty(property).GetString() ?? throw new InvalidDataException(property);

    public static byte[] Bytes(this JsonElement element, string property) =>
        Convert.FromHexString(element.Text(property).Replace(" ", string.Empty, StringComparison.Ordinal));
}
