using System.Globalization;
using System.Text.Json;
using CsCheck;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Instruments.Modbus;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>
/// Frames of the MODBUS Application Protocol Specification V1.1b3 (sections named in the data), checksum and timing of
/// MODBUS over
/// Serial Line V1.02, header of MODBUS Messaging on TCP/IP V1.0b.
/// </summary>
public sealed class ModbusFrameTests
{
    private const byte Unit = 17;

    public static TheoryData<string> Frames =>
        new(PublishedFrames().Select(frame => frame.Text("id")));

    // From memory: the specification's example of function 16, section 6.12 (registers 2 and 3 set to 000A and 0102).
    [Fact]
    public void The_published_example_of_writing_registers_is_met()
    {
        WriteMultipleRegisters request = new(1, [0x000A, 0x0102]);
        Assert.Equal("1000010002" + "04000A0102", Convert.ToHexString(Pdu(request)));
        request.ReadAnswer(Convert.FromHexString("1000010002"));
        Assert.Equal(Pdu(request), Pdu(ModbusRequest.Read(Pdu(request))));
    }

    [Theory]
    [MemberData(nameof(Frames))]
    public void A_published_request_is_written_and_read(string id)
    {
        JsonElement published = PublishedFrames().Single(frame => frame.Text("id") == id);
        ModbusRequest request = Request(id);
        Assert.Equal(published.Bytes("requestPdu"), Pdu(request));
        Assert.Equal(Pdu(request), Pdu(ModbusRequest.Read(published.Bytes("requestPdu"))));

        var frame = new byte[ModbusLimits.RtuFrameLength];
        int length = RtuFrame.Write(Unit, Pdu(request), frame);
        Assert.Equal(published.Bytes("requestRtu_unit_17"), frame[..length]);
        Assert.Equal(length, RtuFrame.RequestLength(frame.AsSpan(0, 7)));

        new MbapHeader(1, 255, Pdu(request).Length).Write(frame);
        byte[] tcp = [.. frame[..MbapHeader.Length], .. Pdu(request)];
        Assert.Equal(published.Bytes("requestTcp_transaction_1_unit_255"), tcp);
    }

    [Theory]
    [MemberData(nameof(Frames))]
    public void A_published_answer_is_written_and_read(string id)
    {
        JsonElement published = PublishedFrames().Single(frame => frame.Text("id") == id);
        byte[] frame = published.Bytes("responseRtu_unit_17");
        byte[] pdu = published.Bytes("responsePdu");
        Assert.True(RtuFrame.IsIntact(frame));
        Assert.Equal(pdu, RtuFrame.Pdu(frame).ToArray());
        Assert.Equal(frame.Length, RtuFrame.AnswerLength(frame.AsSpan(0, 3)));

        var written = new byte[ModbusLimits.PduLength];
        ModbusRequest request = ModbusRequest.Read(published.Bytes("requestPdu"));
        int length = request switch
        {
            ReadBits read => read.WriteAnswer(read.ReadAnswer(pdu), written),
            ReadRegisters read => read.WriteAnswer(read.ReadAnswer(pdu), written),
            ModbusWriteRequest write => Checked(write, pdu).WriteAnswer(written),
            _ => 0,
        };
        Assert.Equal(pdu, written[..length]);
    }

    [Fact]
    public void The_published_values_are_read_from_their_answers()
    {
        bool[] coils = new ReadBits(ModbusFunction.ReadCoils, 0x13, 0x13).ReadAnswer(Pdu("fc01"));
        Assert.Equal("1011001111010110101", string.Concat(coils.Select(on => on ? '1' : '0')));
        ReadRegisters holding = new(ModbusFunction.ReadHoldingRegisters, 0x6B, 3);
        Assert.Equal([555, 0, 100], holding.ReadAnswer(Pdu("fc03")));
        ReadRegisters input = new(ModbusFunction.ReadInputRegisters, 8, 1);
        Assert.Equal([10], input.ReadAnswer(Pdu("fc04")));

        static byte[] Pdu(string id) => PublishedFrames().Single(frame => frame.Text("id") == id).Bytes("responsePdu");
    }

    [Fact]
    public void The_published_exception_reply_is_written_and_read()
    {
        JsonElement published = PublishedCase.Read("modbus.json", "exception").GetProperty("inputs");
        byte[] pdu = published.Bytes("response");
        ReadBits request = new(ModbusFunction.ReadCoils, 0x04A1, 1);
        Assert.Equal(published.Bytes("request"), Pdu(request));

        ModbusRefusalException refusal = Assert.Throws<ModbusRefusalException>(() => request.ReadAnswer(pdu));

        Assert.Equal(ModbusExceptionCode.IllegalDataAddress, refusal.Code);
        var written = new byte[2];
        refusal.Write(written);
        Assert.Equal(pdu, written);
        Assert.True(RtuFrame.IsIntact(published.Bytes("responseRtu_unit_17")));
        foreach (JsonProperty code in published.GetProperty("codes").EnumerateObject())
        {
            byte number = byte.Parse(code.Name, NumberStyles.HexNumber, CultureInfo.InvariantCulture);
            Assert.True(Enum.IsDefined((ModbusExceptionCode)number));
        }
    }

    [Fact]
    public void The_checksum_meets_the_published_values()
    {
        Assert.Equal(0x1241, Crc16.Of([0x02, 0x07]));
        Assert.Equal(0x4B37, Crc16.Of("123456789"u8));
        Assert.Equal(0, Crc16.Of([0x02, 0x07, 0x41, 0x12]));
    }

    [Fact]
    public void The_published_header_is_read()
    {
        byte[] frame = PublishedCase.Read("modbus.json", "mbap").GetProperty("inputs").Bytes("example request");
        Assert.True(MbapHeader.TryRead(frame, out MbapHeader header));
        Assert.Equal(new MbapHeader(0x1501, 0xFF, 5), header);
    }

    // 11 bits a character: one stop bit and parity.
    [Theory]
    [InlineData(1200, 32.0833333333)]
    [InlineData(9600, 4.01041666667)]
    [InlineData(19200, 2.00520833333)]
    [InlineData(38400, 1.75)]
    [InlineData(115200, 1.75)]
    public void The_silent_interval_meets_the_published_values(int baudRate, double ms)
    {
        SerialLink line = TestLinks.Serial(baudRate: baudRate) with { Parity = LineParity.Even };
        Assert.Equal(ms, RtuTiming.SilentInterval(line).TotalMilliseconds, 3);
    }

    [Theory]
    [InlineData("0100000000", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("01000007D1", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("030000007E", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("0100FFFF", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("01FFFF0002", ModbusExceptionCode.IllegalDataAddress)]
    [InlineData("0500011234", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("0F000000020203", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("0F00000002", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("1000000002030001", ModbusExceptionCode.IllegalDataValue)]
    [InlineData("2B0E0100", ModbusExceptionCode.IllegalFunction)]
    [InlineData("", ModbusExceptionCode.IllegalFunction)]
    public void A_server_refuses_a_request_beyond_the_standard(string pdu, ModbusExceptionCode code)
    {
        ModbusRefusalException refusal =
            Assert.Throws<ModbusRefusalException>(() => ModbusRequest.Read(Convert.FromHexString(pdu)));
        Assert.Equal(code, refusal.Code);
    }

    [Fact]
    public void A_client_refuses_a_quantity_beyond_the_standard()
    {
        Assert.Throws<ArgumentOutOfRangeException>(() => new ReadBits(ModbusFunction.ReadCoils, 0, 0));
        Assert.Throws<ArgumentOutOfRangeException>(() => new ReadBits(ModbusFunction.ReadCoils, 0, 2001));
        Assert.Throws<ArgumentOutOfRangeException>(() => new ReadBits(ModbusFunction.ReadCoils, 65535, 2));
        Assert.Throws<ArgumentOutOfRangeException>(() => new ReadRegisters(ModbusFunction.ReadInputRegisters, 0, 126));
        Assert.Throws<ArgumentOutOfRangeException>(() => new WriteMultipleCoils(0, new bool[1969]));
        Assert.Throws<ArgumentOutOfRangeException>(() => new WriteMultipleRegisters(0, new ushort[124]));
        Assert.Equal(ModbusLimits.PduLength - 1, Pdu(new WriteMultipleCoils(0, new bool[1968])).Length);
    }

    [Fact]
    public void Coils_written_are_read_back() =>
        Gen.Select(Gen.Bool.Array[1, 1968], Gen.UShort[0, 60000]).Sample((bits, address) =>
        {
            var pdu = new byte[ModbusLimits.PduLength];
            var write = Assert.IsType<WriteMultipleCoils>(
                ModbusRequest.Read(Pdu(new WriteMultipleCoils(address, bits))));
            ReadBits read = new(ModbusFunction.ReadDiscreteInputs, address, bits.Length);
            return write.Address == address && write.Values.SequenceEqual(bits)
                && read.ReadAnswer(pdu.AsSpan(0, read.WriteAnswer(bits, pdu))).SequenceEqual(bits);
        });

    [Fact]
    public void Registers_written_are_read_back() =>
        Gen.Select(Gen.UShort.Array[1, 123], Gen.UShort[0, 60000]).Sample((words, address) =>
        {
            var pdu = new byte[ModbusLimits.PduLength];
            var write = Assert.IsType<WriteMultipleRegisters>(
                ModbusRequest.Read(Pdu(new WriteMultipleRegisters(address, words))));
            ReadRegisters read = new(ModbusFunction.ReadHoldingRegisters, address, words.Length);
            return write.Address == address && write.Values.SequenceEqual(words)
                && read.ReadAnswer(pdu.AsSpan(0, read.WriteAnswer(words, pdu))).SequenceEqual(words);
        });

    private static IEnumerable<JsonElement> PublishedFrames() =>
        PublishedCase.Read("modbus.json", "frames").GetProperty("inputs").GetProperty("frames").EnumerateArray();

    private static ModbusRequest Request(string id) => id switch
    {
        "fc01" => new ReadBits(ModbusFunction.ReadCoils, 0x13, 0x13),
        "fc03" => new ReadRegisters(ModbusFunction.ReadHoldingRegisters, 0x6B, 3),
        "fc04" => new ReadRegisters(ModbusFunction.ReadInputRegisters, 8, 1),
        "fc05" => new WriteSingleCoil(0xAC, value: true),
        "fc06" => new WriteSingleRegister(1, 3),
        "fc15" => new WriteMultipleCoils(
            0x13, [true, false, true, true, false, false, true, true, true, false]),
        _ => throw new ArgumentOutOfRangeException(nameof(id), id, "No such frame."),
    };

    private static byte[] Pdu(ModbusRequest request)
    {
        var pdu = new byte[ModbusLimits.PduLength];
        return pdu[..request.Write(pdu)];
    }

    private static ModbusWriteRequest Checked(ModbusWriteRequest write, byte[] pdu)
    {
        write.ReadAnswer(pdu);
        return write;
    }
}
