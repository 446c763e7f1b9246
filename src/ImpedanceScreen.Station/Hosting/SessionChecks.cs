using System.Net;
using ImpedanceScreen.Fixtures;
using ImpedanceScreen.Station.Commands;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>What is refused before anything is begun, because it would give wrong records.</summary>
internal static class SessionChecks
{
    /// <exception cref="NotBegunException">The request does not fit the fixture.</exception>
    public static void Refuse(RunRequest request, FixtureFile fixture, SerialChoice serials)
    {
        if (request is { TimeScale: < 1.0, Simulation: null } && !fixture.Links.All(IsOnThisMachine))
        {
            throw new NotBegunException(
                "--time-scale below 1 shortens settling: it is for a simulated bench, with --simulated or on this "
                + "machine's own addresses");
        }

        if (serials.Listed.Count > 1 && fixture.Inputs.BoardPresent is null)
        {
            throw new NotBegunException(
                $"fixture {fixture.Name} has no board_present input: nobody could tell one board from the next, so serial "
                + "numbers are typed or scanned, not listed");
        }
    }

    private static bool IsOnThisMachine(Link link) =>
        link is TcpLink tcp
        && (tcp.Host == "localhost" || (IPAddress.TryParse(tcp.Host, out IPAddress? address)
            && IPAddress.IsLoopback(address)));
}
