using System.CommandLine;
using ImpedanceScreen.Records;
using ImpedanceScreen.Station.Hosting;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>store-create</c>: the only command that makes a record store.</summary>
internal static class StoreCreateCommand
{
    public static Command Make()
    {
        Option<string> store = new("--store") { Description = "Record store to make.", Required = true, HelpName = "FILE" };
        Option<string> station = new("--station")
        {
            Description = "Name of this station; it stands in every record.", Required = true, HelpName = "NAME",
        };
        var command = new Command(
            "store-create", "Make an empty record store with this station's signing key (FILE.key). Keep the key safe.")
        {
            store, station,
        };
        command.SetAction(parsed => Run(parsed.GetRequiredValue(store), parsed.GetRequiredValue(station)));
        return command;
    }

    private static int Run(string path, string station)
    {
        try
        {
            RecordStore.Create(path, station, ScreeningSession.ProgramVersion, TimeProvider.System);
            Console.WriteLine($"{path}: made for station {station}; its signing key is {path}.key");
            return ExitCode.Done;
        }
        catch (Exception e) when (e is IOException or UnauthorizedAccessException or ArgumentException)
        {
            throw new NotBegunException(e.Message, e);
        }
    }
}
