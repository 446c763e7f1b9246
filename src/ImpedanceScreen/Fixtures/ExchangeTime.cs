namespace ImpedanceScreen.Fixtures;

/// <summary>
/// Longest time of one Modbus exchange. Frame lengths follow the MODBUS Application Protocol Specification V1.1b3
/// (functions 01, 02, 15); the silent interval follows MODBUS over Serial Line V1.02, 2.5.1.1: 3.5 characters, fixed at
/// 1.75 ms above 19200 bit/s. On TCP only the unit's answer time counts.
/// </summary>
/// <param name="link">The link.</param>
/// <param name="longestAnswer">Longest time the unit may take to answer.</param>
internal sealed class ExchangeTime(Link link, TimeSpan longestAnswer)
{
    /// <summary>Most coils in one write.</summary>
    internal const int CoilsMost = 1968;

    private const int AddressAndCrc = 3;

    /// <summary>Function 15 on so many coils: one exchange for each 1968.</summary>
    internal TimeSpan WriteCoils(int count) => Split(count, CoilsMost, bits => Exchange(6 + Bytes(bits), 5));

    /// <summary>Function 01 or 02 on so many coils or inputs: one exchange for each 2000.</summary>
    internal TimeSpan ReadBits(int count) => Split(count, 2000, bits => Exchange(5, 2 + Bytes(bits)));

    private static TimeSpan Split(int count, int most, Func<int, TimeSpan> exchange)
    {
        TimeSpan whole = exchange(most) * (count / most);
        return count % most == 0 ? whole : whole + exchange(count % most);
    }

    private static int Bytes(int bits) => (bits + 7) / 8;

    private TimeSpan Exchange(int requestLength, int answerLength)
    {
        if (link is not SerialLink serial)
        {
            return longestAnswer;
        }

        // One character time is not a whole number of ticks: it is multiplied before it is rounded.
        double characterSeconds = (double)serial.BitsPerCharacter / serial.BaudRate;
        double silenceSeconds = serial.BaudRate > 19_200 ? 1.75e-3 : 3.5 * characterSeconds;
        int characters = requestLength + answerLength + (2 * AddressAndCrc);
        return longestAnswer + TimeSpan.FromSeconds((characters * characterSeconds) + (2.0 * silenceSeconds));
    }
}
