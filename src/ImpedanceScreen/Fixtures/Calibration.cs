namespace ImpedanceScreen.Fixtures;

/// <summary>A load or meter whose calibration has run out.</summary>
/// <param name="Name">Its name in the fixture file.</param>
/// <param name="Certificate">Certificate number.</param>
/// <param name="DueOn">Last day on which the calibration was valid.</param>
public sealed record OverdueCalibration(string Name, string Certificate, DateOnly DueOn);

/// <summary>Calibrations of a bench against the calendar, which the caller brings.</summary>
public static class Calibration
{
    /// <summary>Every load and meter that was due before a day; the due day itself is still valid.</summary>
    /// <param name="fixture">The bench.</param>
    /// <param name="today">The day at the bench.</param>
    public static IReadOnlyList<OverdueCalibration> Overdue(FixtureFile fixture, DateOnly today)
    {
        ArgumentNullException.ThrowIfNull(fixture);
        return
        [
            .. fixture.LoadBanks.SelectMany(bank => bank.Loads)
                .Select(load => new OverdueCalibration(load.Name, load.Certificate, load.DueOn))
                .Concat(fixture.Meters.Select(
                    meter => new OverdueCalibration(meter.Name, meter.Certificate, meter.DueOn)))
                .Where(item => item.DueOn < today),
        ];
    }
}
