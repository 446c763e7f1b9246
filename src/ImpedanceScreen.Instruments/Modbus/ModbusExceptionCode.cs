namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Exception codes, MODBUS Application Protocol Specification V1.1b3 section 7.</summary>
public enum ModbusExceptionCode : byte
{
    /// <summary>No exception.</summary>
    None = 0,

    /// <summary>The unit does not know the function.</summary>
    IllegalFunction = 0x01,

    /// <summary>The unit has no such address.</summary>
    IllegalDataAddress = 0x02,

    /// <summary>The request holds a value that is not allowed.</summary>
    IllegalDataValue = 0x03,

    /// <summary>The unit failed while it carried the request out.</summary>
    ServerDeviceFailure = 0x04,

    /// <summary>The unit took the request and needs long for it.</summary>
    Acknowledge = 0x05,

    /// <summary>The unit is busy.</summary>
    ServerDeviceBusy = 0x06,

    /// <summary>The unit's memory is corrupted.</summary>
    MemoryParityError = 0x08,

    /// <summary>A gateway has no way to the unit.</summary>
    GatewayPathUnavailable = 0x0A,

    /// <summary>The unit behind a gateway does not answer.</summary>
    GatewayTargetFailedToRespond = 0x0B,
}
