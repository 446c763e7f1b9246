using System.Security.Cryptography;

namespace ImpedanceScreen.Records.Storing;

/// <summary>
/// The key with which a station signs the head of a closed lot: ECDSA on P-256 with SHA-256 (FIPS 186-5).
/// </summary>
internal sealed class StationKey : IDisposable
{
    private readonly ECDsa key;

    private StationKey(ECDsa key) => this.key = key;

    /// <summary>The public key (SubjectPublicKeyInfo), base64.</summary>
    public string PublicKey => Convert.ToBase64String(key.ExportSubjectPublicKeyInfo());

    /// <summary>Makes a new key.</summary>
    public static StationKey Generate() => new(ECDsa.Create(ECCurve.NamedCurves.nistP256));

    /// <summary>Reads the key file (PKCS#8 PEM).</summary>
    /// <exception cref="IOException">It cannot be read, or is no such key; the message says what to do.</exception>
    public static StationKey Read(string path)
    {
        var read = ECDsa.Create();
        try
        {
            read.ImportFromPem(File.ReadAllText(path));
            return new StationKey(read);
        }
        catch (Exception exception) when (exception is IOException or UnauthorizedAccessException or ArgumentException
            or CryptographicException)
        {
            read.Dispose();
            throw new IOException(
                $"The station key '{path}' cannot be used: {exception.Message} Put the store's own key file back beside it.",
                exception);
        }
    }

    /// <summary>Keeps the key in a new file (PKCS#8 PEM, mode 0600).</summary>
    public void WriteNew(string path) => DurableFile.WriteNewSecret(path, key.ExportPkcs8PrivateKeyPem() + "\n");

    /// <summary>Signs a link.</summary>
    public byte[] Sign(byte[] link) => key.SignData(link, HashAlgorithmName.SHA256);

    /// <summary>Whether a signature of a link was made with the key that belongs to a public key.</summary>
    public static bool Verify(string publicKey, byte[] link, byte[] signature)
    {
        using var signer = ECDsa.Create();
        try
        {
            signer.ImportSubjectPublicKeyInfo(Convert.FromBase64String(publicKey), out _);
            return signer.VerifyData(link, signature, HashAlgorithmName.SHA256);
        }
        catch (Exception exception) when (exception is FormatException or CryptographicException)
        {
            return false;
        }
    }

    /// <inheritdoc/>
    public void Dispose() => key.Dispose();
}
