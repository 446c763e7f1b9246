using ImpedanceScreen.SimulatedBench.Commands;

// One JSON line on standard output and nothing else: what a person reads goes to the error stream.
return await ServeCommand.Make().Parse(args).InvokeAsync();
