using System.Reflection;
using ArchUnitNET.Loader;
using ArchUnitNET.xUnit;
using ImpedanceScreen.Bench;
using ImpedanceScreen.Instruments;
using ImpedanceScreen.Records;
using ImpedanceScreen.Screening.Lots;
using static ArchUnitNET.Fluent.ArchRuleDefinition;

namespace ImpedanceScreen.Tests.House;

/// <summary>Which room may use which.</summary>
public sealed class LayerTests
{
    private const string Own = "ImpedanceScreen";

    private static readonly Assembly Core = typeof(IBench).Assembly;
    private static readonly Assembly Instruments = typeof(FixtureBench).Assembly;
    private static readonly Assembly Records = typeof(RecordStore).Assembly;
    private static readonly Assembly Screening = typeof(LotRunner).Assembly;
    private static readonly Assembly SimulatedBench = Assembly.Load("ImpedanceScreen.SimulatedBench");
    private static readonly Assembly Station = Assembly.Load("ImpedanceScreen.Station");

    private static readonly ArchUnitNET.Domain.Architecture House = new ArchLoader()
        .LoadAssemblies(Core, Instruments, Records, Screening, SimulatedBench, Station)
        .Build();

    public static TheoryData<string, string[]> Allowed => new()
    {
        { Own, [] },
        { $"{Own}.Instruments", [Own] },
        { $"{Own}.Records", [Own] },
        { $"{Own}.Screening", [Own] },
        { $"{Own}.SimulatedBench", [Own, $"{Own}.Instruments"] },
        { $"{Own}.Station", [Own, $"{Own}.Instruments", $"{Own}.Records", $"{Own}.Screening"] },
    };

    [Theory]
    [MemberData(nameof(Allowed))]
    public void A_room_uses_only_the_rooms_below_it(string room, string[] below)
    {
        Assembly assembly = Assembly.Load(room);
        IEnumerable<string> used = assembly.GetReferencedAssemblies()
            .Select(reference => reference.Name!)
            .Where(name => name.StartsWith(Own, StringComparison.Ordinal));
        Assert.Empty(used.Except(below));
    }

    [Fact]
    public void The_core_does_no_input_or_output() =>
        Types().That().ResideInAssembly(Core)
            .Should().NotDependOnAny(Types().That().ResideInNamespaceMatching(@"^System\.(IO\.Ports|Net|Data).*"))
            .AndShould().NotDependOnAny(typeof(File), typeof(FileStream), typeof(Console))
            .Check(House);

    [Fact]
    public void The_way_of_a_board_sees_no_bytes_SQL_or_console() =>
        Types().That().ResideInAssembly(Screening)
            .Should().NotDependOnAny(Types().That().ResideInNamespaceMatching(@"^(System\.(IO|Net|Data)|Microsoft\.Data).*"))
            .AndShould().NotDependOnAny(typeof(Console), typeof(Stream))
            .Check(House);

    [Fact]
    public void Instruments_know_no_limits_and_no_decisions() =>
        Types().That().ResideInAssembly(Instruments)
            .Should().NotDependOnAny(
                Types().That().ResideInNamespaceMatching(@"^ImpedanceScreen\.(Limits|Decisions|Estimation|Recording)$"))
            .Check(House);
}
