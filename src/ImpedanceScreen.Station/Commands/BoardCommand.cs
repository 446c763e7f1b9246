using System.CommandLine;
using ImpedanceScreen.Screening.Serials;
using ImpedanceScreen.Station.Hosting;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>board</c>: screen one board.</summary>
internal static class BoardCommand
{
    public static Command Make()
    {
        var options = new RunOptions();
        Argument<string> serial = new("serial") { Description = "Serial number of the board." };
        var command = new Command("board", "Screen one board.") { serial };
        options.AddTo(command);
        command.SetAction((parsed, cancellation) =>
        {
            RunRequest request = options.Read(parsed);
            string number = parsed.GetRequiredValue(serial);
            return ScreeningSession.RunAsync(
                request,
                job =>
                {
                    SerialChecks.Refuse(job.Limits, [number]);
                    return new SerialChoice(new ListedSerials([]), number, 1, [number]);
                },
                single: true,
                cancellation);
        });
        return command;
    }
}
