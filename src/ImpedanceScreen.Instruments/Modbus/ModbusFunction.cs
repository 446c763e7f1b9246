namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Function codes in use, MODBUS Application Protocol Specification V1.1b3 section 6.</summary>
public enum ModbusFunction : byte
{
    /// <summary>No function.</summary>
    None = 0,

    /// <summary>Read coils.</summary>
    ReadCoils = 0x01,

    /// <summary>Read discrete inputs.</summary>
    ReadDiscreteInputs = 0x02,

    /// <summary>Read holding registers.</summary>
    ReadHoldingRegisters = 0x03,

    /// <summary>Read input registers.</summary>
    ReadInputRegisters = 0x04,

    /// <summary>Write single coil.</summary>
    WriteSingleCoil = 0x05,

    /// <summary>Write single register.</summary>
    WriteSingleRegister = 0x06,

    /// <summary>Write multiple coils.</summary>
    WriteMultipleCoils = 0x0F,

    /// <summary>Write multiple registers.</summary>
    WriteMultipleRegisters = 0x10,
}
