using System.Text;

namespace ImpedanceScreen.Records.Bodies;

/// <summary>The words by which records and columns name the values of an enumeration: <c>current-limited</c>.</summary>
/// <typeparam name="T">The enumeration.</typeparam>
internal static class Words<T>
    where T : struct, Enum
{
    private static readonly Dictionary<T, string> ByValue =
        Enum.GetValues<T>().ToDictionary(value => value, value => Hyphenate(value.ToString()));

    private static readonly Dictionary<string, T> ByWord =
        ByValue.ToDictionary(pair => pair.Value, pair => pair.Key, StringComparer.Ordinal);

    public static string Of(T value) => ByValue[value];

    public static T Parse(string word) => ByWord.TryGetValue(word, out T value)
        ? value
        : throw new FormatException($"'{word}' is no {typeof(T).Name}.");

    private static string Hyphenate(string name)
    {
        var word = new StringBuilder();
        foreach (char letter in name)
        {
            if (char.IsUpper(letter) && word.Length > 0)
            {
                word.Append('-');
            }

            word.Append(char.ToLowerInvariant(letter));
        }

        return word.ToString();
    }
}
