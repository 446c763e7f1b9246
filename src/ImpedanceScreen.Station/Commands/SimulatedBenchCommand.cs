using System.CommandLine;
using ImpedanceScreen.Station.Simulated;

namespace ImpedanceScreen.Station.Commands;

/// <summary><c>simulated-bench</c>: serve a simulated bench over the real protocols.</summary>
internal static class SimulatedBenchCommand
{
    public static Command Make()
    {
        Argument<string[]> rest = new("arguments")
        {
            Description = "Passed on as they are; put -- before them: simulated-bench -- --help",
            Arity = ArgumentArity.ZeroOrMore,
        };
        var command = new Command(
            "simulated-bench",
            "Serve a simulated relay fixture, meter and boards over Modbus and SCPI until standard input closes.")
        {
            rest,
        };
        command.SetAction((parsed, cancellation) =>
            SimulatedBenchProcess.RunAsync(parsed.GetValue(rest) ?? [], cancellation));
        return command;
    }
}
