namespace ImpedanceScreen.SimulatedBench.Circuits;

/// <summary>
/// A load bank's common rail with every output whose selector is closed, solved at rest (node voltages by Millman's
/// theorem). A source beyond its current limit counts as a source of that current.
/// </summary>
internal sealed class Bus
{
    private readonly IReadOnlyList<Port> ports;
    private readonly double[] limitingAmpere;
    private readonly double loadSiemens;
    private readonly double returnVolt;

    public Bus(IReadOnlyList<Port> ports, double loadSiemens, double returnVolt)
    {
        this.ports = ports;
        this.loadSiemens = loadSiemens;
        this.returnVolt = returnVolt;
        limitingAmpere = new double[ports.Count];
        Volt = Solve();

        // One source that gives in moves the rail: each pass may find one more that limits.
        for (int pass = 0; pass < ports.Count && MarkLimiting(); pass++)
        {
            Volt = Solve();
        }
    }

    /// <summary>Voltage of the rail, V.</summary>
    public double Volt { get; }

    /// <summary>Voltage of a port's sensed point, V.</summary>
    public double PointVolt(int port)
    {
        Port linear = Effective(port);
        if (limitingAmpere[port] != 0.0)
        {
            // V = bus + (I - V G_meter) R_series
            return (Volt + (limitingAmpere[port] * linear.SeriesOhm)) / (1.0 + (linear.MeterSiemens * linear.SeriesOhm));
        }

        double current = (linear.MeteredVolt - Volt) * linear.BusSiemens;
        return Volt + (current * linear.SeriesOhm);
    }

    /// <summary>All conductance at a port's sensed point, S: with its capacitance it makes the time constant.</summary>
    public double PointSiemens(int port)
    {
        double others = loadSiemens;
        for (int i = 0; i < ports.Count; i++)
        {
            others += i == port ? 0.0 : Effective(i).BusSiemens;
        }

        double seen = others == 0.0 ? 0.0 : 1.0 / (ports[port].SeriesOhm + (1.0 / others));
        return Effective(port).PointSiemens + seen;
    }

    private Port Effective(int port) => limitingAmpere[port] == 0.0 ? ports[port] : ports[port].Limited;

    private double Solve()
    {
        double current = returnVolt * loadSiemens;
        double conductance = loadSiemens;
        for (int i = 0; i < ports.Count; i++)
        {
            Port port = Effective(i);
            current += limitingAmpere[i] + (port.MeteredVolt * port.BusSiemens);
            conductance += port.BusSiemens;
        }

        return conductance == 0.0 ? 0.0 : current / conductance;
    }

    private bool MarkLimiting()
    {
        bool more = false;
        for (int i = 0; i < ports.Count; i++)
        {
            if (limitingAmpere[i] == 0.0 && !double.IsPositiveInfinity(ports[i].SourceOhm))
            {
                double current = (ports[i].SourceVolt - PointVolt(i)) / ports[i].SourceOhm;
                if (Math.Abs(current) > ports[i].LimitAmpere)
                {
                    limitingAmpere[i] = Math.CopySign(ports[i].LimitAmpere, current);
                    more = true;
                }
            }
        }

        return more;
    }
}
