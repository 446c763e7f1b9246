using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.SimulatedBench.Circuits;
using ImpedanceScreen.SimulatedBench.Populations;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>A circuit of an exact bench with a board in it, driven by hand through simulated time.</summary>
internal sealed class CircuitBench
{
    public const double WindowSeconds = 0.020;
    private const double LongSeconds = 10.0;

    public CircuitBench(ExactBench exact)
    {
        ScreeningJob job = exact.Job();
        Circuit = new Circuit(job, new BenchTruth(job.Fixture, exact.Population().Surroundings, seed: 1), seed: 1);
        Circuit.SetBoard(new BoardFactory(exact.Population(), 1, "X-1").Make(1), 0.0);
        On(ExactBench.Common, ExactBench.Supply, ExactBench.Stimulus);
        Rest();
    }

    public Circuit Circuit { get; }

    public double Seconds { get; private set; }

    public static Relay Load(string name) => ExactBench.LoadOf(name, 0.0, (ushort)(10 + Array.IndexOf(["L10", "L100", "L1k"], name)), 0.0).Relay;

    public void On(params Relay[] relays) => Command(true, relays);

    public void Off(params Relay[] relays) => Command(false, relays);

    public void Wait(double seconds)
    {
        Seconds += seconds;
        Circuit.AdvanceTo(Seconds);
    }

    public void Rest() => Wait(LongSeconds);

    public double Read(double windowSeconds = WindowSeconds)
    {
        Measurement measurement = Circuit.Measure("meter", Seconds, Seconds + windowSeconds);
        Wait(windowSeconds);
        return measurement.MeanVolt;
    }

    public double ReadAtRest()
    {
        Rest();
        return Read();
    }

    private void Command(bool on, Relay[] relays)
    {
        foreach (Relay relay in relays)
        {
            Circuit.CommandCoil(relay.Unit, relay.Coil, on, Seconds);
        }
    }
}
