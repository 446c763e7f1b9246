using System.CommandLine;

namespace ImpedanceScreen.Station.Commands;

/// <summary>Options that name the files of a bench, shared by commands.</summary>
internal static class FileOptions
{
    public static Option<string> Fixture() =>
        new("--fixture") { Description = "Fixture file (YAML).", Required = true, HelpName = "FILE" };

    public static Option<string> Limits() =>
        new("--limits") { Description = "Limit file of the product (YAML).", Required = true, HelpName = "FILE" };

    public static Option<string> Store() =>
        new("--store") { Description = "Record store, made by store-create.", Required = true, HelpName = "FILE" };
}
