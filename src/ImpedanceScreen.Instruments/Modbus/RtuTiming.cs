using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Instruments.Modbus;

/// <summary>Silence on a serial line, MODBUS over Serial Line V1.02 section 2.5.1.1.</summary>
public static class RtuTiming
{
    private const int FixedAboveBaudRate = 19200;
    private static readonly TimeSpan FixedInterval = TimeSpan.FromMilliseconds(1.75);

    /// <summary>Silence that parts two frames (t3.5): 3.5 characters, fixed at 1.75 ms above 19200 bit/s.</summary>
    public static TimeSpan SilentInterval(SerialLink line)
    {
        ArgumentNullException.ThrowIfNull(line);
        return line.BaudRate > FixedAboveBaudRate ? FixedInterval : 3.5 * line.CharacterTime;
    }
}
