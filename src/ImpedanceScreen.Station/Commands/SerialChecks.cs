using System.Text.RegularExpressions;
using ImpedanceScreen.Limits;

namespace ImpedanceScreen.Station.Commands;

/// <summary>Serial numbers known beforehand are checked before anything is switched.</summary>
internal static class SerialChecks
{
    public static void Refuse(LimitFile limits, IReadOnlyList<string> serials)
    {
        Regex pattern = SerialNumber.Compile(limits.SerialPattern);
        if (serials.FirstOrDefault(serial => !pattern.IsMatch(serial)) is { } bad)
        {
            throw new NotBegunException(
                $"'{bad}' is no serial number of {limits.Product}: its limit file asks for {limits.SerialPattern}");
        }

        if (serials.GroupBy(serial => serial, StringComparer.Ordinal).FirstOrDefault(same => same.Count() > 1) is { } twice)
        {
            throw new NotBegunException($"serial number '{twice.Key}' is named {twice.Count()} times: each board once");
        }
    }
}
