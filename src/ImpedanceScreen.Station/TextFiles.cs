using System.Text;
using ImpedanceScreen.Files;

namespace ImpedanceScreen.Station;

/// <summary>Text files that a person names on the command line.</summary>
internal static class TextFiles
{
    private static readonly UTF8Encoding Strict = new(encoderShouldEmitUTF8Identifier: false, throwOnInvalidBytes: true);

    /// <exception cref="NotBegunException">The file cannot be read or is not UTF-8.</exception>
    public static FileText Read(string path)
    {
        try
        {
            return new FileText(path, File.ReadAllText(path, Strict));
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or ArgumentException)
        {
            throw new NotBegunException($"{path}: cannot be read as UTF-8 text: {e.Message}", e);
        }
    }
}
