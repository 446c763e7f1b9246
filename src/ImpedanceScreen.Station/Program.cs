using System.CommandLine;
using ImpedanceScreen.Recording;
using ImpedanceScreen.Station;
using ImpedanceScreen.Station.Commands;

var root = new RootCommand(
    "Screens modules whose outputs must act like a known source: fits source voltage and internal resistance with "
    + "their uncertainty, decides, and keeps traceable records.")
{
    BoardCommand.Make(),
    LotCommand.Make(),
    ValidateCommand.Make(),
    StoreCreateCommand.Make(),
    AuditCommand.Make(),
    OpenRelaysCommand.Make(),
    SimulatedBenchCommand.Make(),
};

ParseResult parsed = root.Parse(args);

// Opening relays over a doubtful link takes longer than the default two seconds; a service manager's limit lies above.
var invocation = new InvocationConfiguration
{
    ProcessTerminationTimeout = TimeSpan.FromSeconds(25), EnableDefaultExceptionHandler = false,
};
try
{
    int code = await parsed.InvokeAsync(invocation);
    return parsed.Errors.Count > 0 ? ExitCode.NotBegun : code;
}
catch (NotBegunException e)
{
    await Console.Error.WriteLineAsync(e.Message);
    return ExitCode.NotBegun;
}
catch (StoreFaultException e)
{
    await Console.Error.WriteLineAsync(e.Message);
    return ExitCode.StoreFault;
}
catch (OperationCanceledException)
{
    // Told to stop before anything had begun.
    return ExitCode.Stopped;
}
