using CsCheck;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Records.Bodies;
using ImpedanceScreen.Records.Canonical;
using ImpedanceScreen.Tests.Records.Shared;
using Record = ImpedanceScreen.Recording.Record;

namespace ImpedanceScreen.Tests.Records;

public sealed class BodyCodecTests
{
    private static readonly string Data = Path.Combine(AppContext.BaseDirectory, "Records", "Data", "records");

    [Fact]
    public void Every_record_comes_back_the_same_and_its_body_is_canonical() => Gen.Int.Sample(
        seed =>
        {
            var random = new RandomRecords(seed);
            foreach (Record record in new Record[] { random.Board(), random.LotClose(), random.Hold() })
            {
                byte[] body = BodyCodec.Encode(record);
                Record back = BodyCodec.Decode(body);
                Assert.Equal(record.Kind, back.Kind);
                Assert.Equal(body, BodyCodec.Encode(back));
                Assert.Equal(body, CanonicalJson.Canonicalize(body));
                Assert.Equivalent(record, back, strict: true);
            }
        },
        iter: 40);

    [Fact]
    public void What_is_not_known_is_null_and_comes_back_as_not_known()
    {
        BoardRecord board = new RandomRecords(3).Board();
        StateResult state = board.States[0];
        state = state with { Decisions = [state.Decisions[0] with { Value = double.NaN, Max = null }] };
        byte[] body = BodyCodec.Encode(board with { States = [state], TemperatureDegC = null, Lot = null });
        var back = (BoardRecord)BodyCodec.Decode(body);
        Assert.True(double.IsNaN(back.States[0].Decisions[0].Value));
        Assert.Null(back.States[0].Decisions[0].Max);
        Assert.Null(back.TemperatureDegC);
        Assert.Null(back.Lot);
    }

    /// <summary>Bodies of format 1 as released: their bytes are what stations hold.</summary>
    [Theory]
    [InlineData("board", typeof(BoardRecord))]
    [InlineData("store", typeof(StoreRecord))]
    [InlineData("lot-close", typeof(LotCloseRecord))]
    [InlineData("hold", typeof(HoldRecord))]
    public void A_released_format_is_still_read_and_written(string kind, Type type)
    {
        byte[] body = File.ReadAllBytes(Path.Combine(Data, $"format-1-{kind}.json"));
        Record record = BodyCodec.Decode(body);
        Assert.IsType(type, record);
        Assert.Equal(body, BodyCodec.Encode(record));
    }

    [Theory]
    [InlineData("{\"format\":2,\"kind\":\"hold\"}")]
    [InlineData("{\"format\":1,\"kind\":\"unheard-of\"}")]
    [InlineData("{\"format\":1,\"kind\":\"hold\"}")]
    [InlineData("[]")]
    [InlineData("")]
    public void A_body_that_is_none_is_refused(string body) =>
        Assert.Throws<FormatException>(() => BodyCodec.Decode(System.Text.Encoding.UTF8.GetBytes(body)));
}
