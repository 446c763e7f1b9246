using CsCheck;

namespace ImpedanceScreen.Tests.SimulatedBench;

/// <summary>The circuit against closed forms.</summary>
public sealed class CircuitTests
{
    private const double Rounding = 1e-9;

    // Common practice: a load equal to the internal resistance halves the voltage, ten times as much loses 1/11, a
    // hundred times 1/101.
    [Theory]
    [InlineData("L10", 1.0 / 2.0)]
    [InlineData("L100", 1.0 / 11.0)]
    [InlineData("L1k", 1.0 / 101.0)]
    public void A_load_takes_its_share_of_the_voltage(string load, double lost)
    {
        CircuitBench bench = new(new ExactBench { VoltageVolt = 2.0, ResistanceOhm = 10.0 });
        bench.On(ExactBench.Sense("A"), ExactBench.Selector("A"), CircuitBench.Load(load));
        Assert.Equal(2.0 * (1.0 - lost), bench.ReadAtRest(), Rounding);
    }

    [Fact]
    public void Without_load_only_the_meter_loads_the_source()
    {
        CircuitBench bench = new(new ExactBench { ResistanceOhm = 1000.0, InputOhm = 10e6 });
        bench.On(ExactBench.Sense("A"), ExactBench.Selector("A"));
        Assert.Equal(2.0 * 10e6 / (10e6 + 1000.0), bench.ReadAtRest(), Rounding);
    }

    [Theory]
    [InlineData("A")]
    [InlineData("B")]
    public void Voltages_follow_the_measurement_model_for_any_values(string output) =>
        Gen.Select(Gen.Double[-5, 5], Gen.Double[0.1, 5000], Gen.Double[0, 2], Gen.Double[0, 2], Gen.Bool)
            .Sample(
                (volt, ohm, lead, branch, toRail) =>
                {
                    const double inputOhm = 1e6;
                    CircuitBench bench = new(new ExactBench
                    {
                        VoltageVolt = volt, ResistanceOhm = ohm, LeadOhm = lead, BranchOhm = branch, InputOhm = inputOhm,
                    });
                    if (toRail)
                    {
                        bench.Off(ExactBench.Common);
                        bench.On(ExactBench.Rail);
                    }

                    bench.On(ExactBench.Sense(output), ExactBench.Selector(output), CircuitBench.Load("L100"));

                    // V = (Vth + R V_ret G_load) / (1 + R (G_load + G_meter)): two-wire adds the lead to the source,
                    // terminal adds it to the load.
                    double ahead = output == "A" ? ohm + lead : ohm;
                    double load = 1.0 / (100.0 + branch + (output == "A" ? 0.0 : lead));
                    double back = toRail ? ExactBench.RailVolt : 0.0;
                    double expected = (volt + (ahead * back * load)) / (1.0 + (ahead * (load + (1.0 / inputOhm))));
                    Assert.Equal(expected, bench.ReadAtRest(), 1e-6 * (1.0 + Math.Abs(expected)));
                },
                iter: 100);

    [Fact]
    public void The_meter_reads_the_rail_through_its_own_sense_relay()
    {
        CircuitBench bench = new(new ExactBench());
        bench.On(ExactBench.RailSense);
        Assert.Equal(ExactBench.RailVolt, bench.ReadAtRest(), Rounding);
    }

    [Fact]
    public void A_reading_taken_too_early_is_the_mean_of_the_exponential_and_a_late_one_is_right()
    {
        // 10 Ω and 10 Ω in parallel with 1 mF (and 100 pF of stray): 5 ms.
        CircuitBench bench = new(new ExactBench { CapacitanceFarad = 1e-3 });
        bench.On(ExactBench.Sense("A"), ExactBench.Selector("A"));
        bench.Rest();
        bench.On(CircuitBench.Load("L10"));
        bench.Wait(0.004);
        double tau = 5.0 * (1e-3 + 100e-12);
        double early = bench.Read();
        double first = bench.Read();
        double second = bench.Read();
        double late = bench.ReadAtRest();
        Assert.Equal(1.0, late, Rounding);
        Assert.True(early > late + 0.1, $"early reading {early}");

        // Both start where the same exponential stands; each next window has fallen by exp(-window / tau).
        double fall = Math.Exp(-CircuitBench.WindowSeconds / tau);
        Assert.Equal(fall, (first - late) / (early - late), 1e-6);
        Assert.Equal(fall, (second - late) / (first - late), 1e-6);
    }

    [Fact]
    public void The_discharge_after_power_off_integrates_to_the_closed_form()
    {
        CircuitBench bench = new(new ExactBench { CapacitanceFarad = 1e-3, ResistanceOhm = 100.0 });
        bench.On(ExactBench.Sense("A"));
        bench.Rest();
        bench.Off(ExactBench.Supply);
        bench.Wait(0.002);
        double tau = 100.0 * (1e-3 + 100e-12);
        double begin = bench.Read(1e-9);
        double mean = bench.Read();
        double window = CircuitBench.WindowSeconds;
        Assert.InRange(begin, 1.95, 2.0);
        Assert.Equal(begin * tau / window * (1.0 - Math.Exp(-window / tau)), mean, 1e-6);
    }

    [Fact]
    public void A_contact_comes_to_rest_within_its_declared_time_and_not_at_once()
    {
        CircuitBench bench = new(new ExactBench());
        for (int i = 0; i < 50; i++)
        {
            bench.On(CircuitBench.Load("L10"));
            bench.Wait(0.0015);
            Assert.False(bench.Circuit.IsClosed(CircuitBench.Load("L10")));
            bench.Wait(0.0025);
            Assert.True(bench.Circuit.IsClosed(CircuitBench.Load("L10")));
            bench.Off(CircuitBench.Load("L10"));
            bench.Wait(0.0005);
            Assert.True(bench.Circuit.IsClosed(CircuitBench.Load("L10")));
            bench.Wait(0.0015);
            Assert.False(bench.Circuit.IsClosed(CircuitBench.Load("L10")));
        }
    }

    [Fact]
    public void A_closing_contact_bounces()
    {
        CircuitBench bench = new(new ExactBench());
        int reopened = 0;
        for (int i = 0; i < 50; i++)
        {
            bench.On(CircuitBench.Load("L10"));
            bool wasClosed = false;
            for (int step = 0; step < 400; step++)
            {
                bench.Wait(0.00001);
                bool isClosed = bench.Circuit.IsClosed(CircuitBench.Load("L10"));
                reopened += wasClosed && !isClosed ? 1 : 0;
                wasClosed = isClosed;
            }

            bench.Off(CircuitBench.Load("L10"));
            bench.Wait(0.002);
        }

        Assert.InRange(reopened, 25, 150);
    }

    [Theory]
    [InlineData("A", "L1k", 2.0 * 1000.0 / 1010.0)]
    [InlineData("A", "L10", 0.05 * 10.0)]
    [InlineData("B", "L10", 0.05 * 10.0)]
    public void A_weak_buffer_holds_its_current(string output, string load, double expectedVolt)
    {
        CircuitBench bench = new(new ExactBench { CurrentLimitAmpere = 0.05 });
        bench.On(ExactBench.Sense(output), ExactBench.Selector(output), CircuitBench.Load(load));
        Assert.Equal(expectedVolt, bench.ReadAtRest(), Rounding);
    }

    [Fact]
    public void Without_sense_relay_the_meter_holds_the_last_voltage_and_loses_it_by_leakage()
    {
        CircuitBench bench = new(new ExactBench());
        bench.On(ExactBench.Sense("A"));
        bench.Rest();
        bench.Off(ExactBench.Sense("A"));
        bench.Wait(0.002);
        Assert.InRange(bench.Read(), 1.95, 2.0);
        bench.Rest();
        bench.Rest();
        Assert.Equal(0.0, bench.ReadAtRest(), 1e-3);
    }

    [Fact]
    public void Two_selected_outputs_share_the_load()
    {
        CircuitBench bench = new(new ExactBench());
        bench.On(ExactBench.Sense("A"), ExactBench.Selector("A"), ExactBench.Selector("B"), CircuitBench.Load("L10"));

        // Two sources of 10 Ω in parallel are one of 5 Ω.
        Assert.Equal(2.0 * 10.0 / 15.0, bench.ReadAtRest(), Rounding);
    }

    [Fact]
    public void A_load_without_return_loads_nothing()
    {
        CircuitBench bench = new(new ExactBench());
        bench.Off(ExactBench.Common);
        bench.On(ExactBench.Sense("A"), ExactBench.Selector("A"), CircuitBench.Load("L10"));
        Assert.Equal(2.0, bench.ReadAtRest(), Rounding);
    }

    [Fact]
    public void An_output_that_no_stimulus_drives_has_no_voltage()
    {
        CircuitBench bench = new(new ExactBench());
        bench.On(ExactBench.Sense("B"));
        Assert.Equal(2.0, bench.ReadAtRest(), Rounding);
        bench.Off(ExactBench.Stimulus);
        Assert.Equal(0.0, bench.ReadAtRest(), Rounding);
    }

    [Fact]
    public void The_board_comes_up_within_its_warm_up_and_not_at_once()
    {
        CircuitBench bench = new(new ExactBench());
        bench.On(ExactBench.Sense("A"));
        bench.Off(ExactBench.Supply);
        Assert.Equal(0.0, bench.ReadAtRest(), Rounding);
        bench.On(ExactBench.Supply);
        bench.Wait(0.010);
        Assert.Equal(0.0, bench.Read(0.001), Rounding);
        bench.Wait(0.034);
        Assert.Equal(2.0, bench.Read(), Rounding);
    }

    [Fact]
    public void Without_coil_supply_every_contact_opens_and_with_it_commanded_ones_close_again()
    {
        CircuitBench bench = new(new ExactBench());
        bench.On(CircuitBench.Load("L10"));
        bench.Rest();
        bench.Circuit.SetCoilSupply(false, bench.Seconds);
        bench.Wait(0.002);
        Assert.False(bench.Circuit.IsClosed(CircuitBench.Load("L10")));
        Assert.False(bench.Circuit.IsClosed(ExactBench.Supply));
        bench.Circuit.SetCoilSupply(true, bench.Seconds);
        bench.Wait(0.004);
        Assert.True(bench.Circuit.IsClosed(CircuitBench.Load("L10")));
        Assert.False(bench.Circuit.IsClosed(CircuitBench.Load("L100")));
    }

    [Fact]
    public void Without_board_the_output_carries_what_the_load_returns_to()
    {
        CircuitBench bench = new(new ExactBench());
        bench.Circuit.SetBoard(null, bench.Seconds);
        bench.Off(ExactBench.Common);
        bench.On(ExactBench.Rail, ExactBench.Sense("A"), ExactBench.Selector("A"), CircuitBench.Load("L1k"));
        Assert.Equal(ExactBench.RailVolt, bench.ReadAtRest(), Rounding);
    }
}
