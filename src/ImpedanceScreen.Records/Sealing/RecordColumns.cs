using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;

namespace ImpedanceScreen.Records.Sealing;

/// <summary>The identifying columns of a record's row, all of them copies of what the body says.</summary>
internal sealed record RecordColumns(
    string Kind, byte[]? AttemptId, string? Product, string? Serial, long? Attempt, string? Lot, string? Disposition)
{
    public static RecordColumns Of(Record record) => record switch
    {
        BoardRecord board => new RecordColumns(
            board.Kind,
            Bytes(board.AttemptId),
            board.Product,
            board.Serial,
            board.Attempt,
            board.Lot,
            Words<Disposition>.Of(board.Disposition)),
        LotCloseRecord close => new RecordColumns(close.Kind, null, close.Product, null, null, close.Lot, null),
        HoldRecord hold => new RecordColumns(hold.Kind, null, null, null, null, hold.Lot, null),
        _ => new RecordColumns(record.Kind, null, null, null, null, null, null),
    };

    /// <summary>An identifier as it stands in columns: 16 bytes in the order in which they are printed.</summary>
    public static byte[] Bytes(Guid identifier) => identifier.ToByteArray(bigEndian: true);
}
