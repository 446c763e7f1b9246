using System.Globalization;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>What a person is told about calibrations that have run out.</summary>
internal static class CalibrationWarnings
{
    /// <summary>A line for each load and meter of a fixture whose calibration has run out today.</summary>
    public static IReadOnlyList<string> Of(FixtureFile fixture)
    {
        DateOnly today = DateOnly.FromDateTime(TimeProvider.System.GetLocalNow().Date);
        return
        [
            .. Calibration.Overdue(fixture, today).Select(item => string.Create(
                CultureInfo.InvariantCulture,
                $"{fixture.Name}: the calibration of {item.Name} (certificate {item.Certificate}) was good until "
                + $"{item.DueOn:yyyy-MM-dd}: results rest on it all the same; have it calibrated")),
        ];
    }
}
