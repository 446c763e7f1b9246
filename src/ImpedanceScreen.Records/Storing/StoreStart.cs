using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Records.Sealing;

namespace ImpedanceScreen.Records.Storing;

/// <summary>What must hold before a store is written to: key, record 0 and head belong together.</summary>
internal static class StoreStart
{
    /// <exception cref="IOException">They do not; the message says what to do.</exception>
    public static StoreRecord RequireFit(StoreConnection connection, StationKey key, string path, out ChainHead head)
    {
        // One transaction: another process may append meanwhile.
        connection.Execute("BEGIN");
        if (connection.Scalar("SELECT body FROM record WHERE sequence = 0") is not byte[] packed
            || BodyCodec.Decode(BodyCompression.Unpack(packed)) is not StoreRecord origin)
        {
            throw new IOException($"The store '{path}' has no record 0. Restore it from its last good copy.");
        }

        if (origin.PublicKey != key.PublicKey)
        {
            throw new IOException(
                $"The key '{StorePath.KeyOf(path)}' is not the one of this store. Put the store's own key file back.");
        }

        (long sequence, byte[] link) = Appender.ReadHead(connection);
        long last = (long)(connection.Scalar("SELECT max(sequence) FROM record") ?? -1L);
        object? lastLink = connection.Scalar("SELECT link FROM record WHERE sequence = $a", last);
        connection.Execute("COMMIT");
        if (last != sequence || lastLink is not byte[] bytes || !bytes.AsSpan().SequenceEqual(link))
        {
            throw new IOException(
                $"The head of the store '{path}' is record {sequence}, its last record is {last}. Audit the store, and "
                + "restore it from its last good copy.");
        }

        head = new ChainHead(sequence, Convert.ToHexStringLower(link));
        return origin;
    }
}
