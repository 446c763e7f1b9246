using System.Security.Cryptography;
using System.Text;

namespace ImpedanceScreen.Files;

/// <summary>The text of a limit, fixture or population file with its identity.</summary>
/// <param name="Name">The file's name as the user gave it.</param>
/// <param name="Text">The whole text.</param>
public sealed record FileText(string Name, string Text)
{
    /// <summary>SHA-256 (FIPS 180-4) of the text's UTF-8 bytes, in lower-case hexadecimal.</summary>
    public string Sha256 { get; } = Convert.ToHexStringLower(SHA256.HashData(Encoding.UTF8.GetBytes(Text)));
}
