using System.Diagnostics;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>Programs beside the tests.</summary>
internal static class Peers
{
    /// <summary>Starts a program; a missing one fails the test and says what to install.</summary>
    public static Process Start(string program, params IEnumerable<string> arguments)
    {
        ProcessStartInfo start = new(program)
        {
            RedirectStandardInput = true, RedirectStandardOutput = true, RedirectStandardError = true,
            UseShellExecute = false,
        };
        foreach (string argument in arguments)
        {
            start.ArgumentList.Add(argument);
        }

        try
        {
            return Process.Start(start)!;
        }
        catch (System.ComponentModel.Win32Exception e)
        {
            throw new InvalidOperationException(
                $"{program} is missing: apt-get install socat python3-pymodbus python3-serial-asyncio", e);
        }
    }

    /// <summary>Holds a conversation of pymodbus with a simulated bench.</summary>
    public static async Task HoldPymodbusAsync(params string[] arguments)
    {
        string script = Path.Combine(AppContext.BaseDirectory, "SimulatedBench", "Data", "pymodbus_client.py");
        using Process python = Start("/usr/bin/python3", [script, .. arguments]);
        Task<string> output = python.StandardOutput.ReadToEndAsync();
        string errors = await python.StandardError.ReadToEndAsync();
        await python.WaitForExitAsync();
        Assert.True(python.ExitCode == 0, errors);
        Assert.Equal("done", (await output).Trim());
    }
}
