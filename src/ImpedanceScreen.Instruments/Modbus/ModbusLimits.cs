namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Sizes and quantities, MODBUS Application Protocol Specification V1.1b3 sections 4.1 and 6.</summary>
public static class ModbusLimits
{
    /// <summary>Longest protocol data unit, bytes.</summary>
    public const int PduLength = 253;

    /// <summary>Longest frame on a serial line, bytes.</summary>
    public const int RtuFrameLength = 256;

    /// <summary>Longest frame over TCP, bytes.</summary>
    public const int TcpFrameLength = 260;

    /// <summary>Most coils or discrete inputs in one read.</summary>
    public const int ReadBits = 2000;

    /// <summary>Most registers in one read.</summary>
    public const int ReadRegisters = 125;

    /// <summary>Most coils in one write.</summary>
    public const int WriteCoils = 1968;

    /// <summary>Most registers in one write.</summary>
    public const int WriteRegisters = 123;

    /// <summary>Highest unit address of a device; 0 is broadcast, 248 to 255 are reserved.</summary>
    public const int UnitAddress = 247;

    internal const int Addresses = 65536;
}
