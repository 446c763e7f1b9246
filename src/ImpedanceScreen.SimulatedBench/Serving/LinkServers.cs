using ImpedanceScreen.Fixtures;
using ImpedanceScreen.SimulatedBench.Meters;

namespace ImpedanceScreen.SimulatedBench.Serving;

/// <summary>The server of each link, by what the fixture file puts on it.</summary>
internal sealed class LinkServers : IDisposable
{
    private readonly Dictionary<string, ILinkServer> servers = [];
    private readonly List<ScpiDialogue> dialogues = [];

    /// <exception cref="BenchStartException">Two instruments that cannot share a link are on one.</exception>
    public LinkServers(BenchModel model, FixtureFile fixture)
    {
        foreach (Link link in fixture.Links)
        {
            List<SimulatedMeter> meters = [.. model.Meters.Where(meter => meter.Meter.Link == link.Name)];
            bool hasUnits = model.Units.Any(unit => unit.Unit.Link == link.Name);
            if (meters.Count > 1 || (meters.Count == 1 && hasUnits))
            {
                throw new BenchStartException($"link '{link.Name}' carries a meter and something else: give it its own link");
            }

            if (meters.Count == 1)
            {
                ScpiDialogue dialogue = new(meters[0]);
                dialogues.Add(dialogue);
                servers[link.Name] = new ScpiServer(model, dialogue, link);
            }
            else
            {
                UnitGroup units = new(model, link.Name);
                servers[link.Name] = link is SerialLink line
                    ? new ModbusRtuServer(model, units, line)
                    : new ModbusTcpServer(units);
            }
        }
    }

    public ILinkServer this[string link] => servers[link];

    /// <inheritdoc/>
    public void Dispose() => dialogues.ForEach(dialogue => dialogue.Dispose());
}
