using System.CommandLine;
using ImpedanceScreen.SimulatedBench.Commands;

// A signal lets every connection come to its end; the library's own limit of two seconds is short on a busy machine.
var invocation = new InvocationConfiguration { ProcessTerminationTimeout = TimeSpan.FromSeconds(25) };

// One JSON line on standard output and nothing else: what a person reads goes to the error stream.
return await ServeCommand.Make().Parse(args).InvokeAsync(invocation);
