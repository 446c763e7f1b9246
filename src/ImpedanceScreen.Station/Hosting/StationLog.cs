using System.Globalization;
using Serilog;
using Serilog.Events;
using Serilog.Formatting.Compact;

namespace ImpedanceScreen.Station.Hosting;

/// <summary>The log: every event to a rolling file in compact JSON, errors to standard error too.</summary>
internal static class StationLog
{
    private const long FileBytesMax = 64L * 1024 * 1024;

    /// <summary>Path pattern of the log of a store; the date stands before the ending.</summary>
    public static string PathFor(string storePath, string? folder)
    {
        string place = folder ?? Path.GetDirectoryName(storePath) ?? "";
        return Path.Combine(place, Path.GetFileNameWithoutExtension(storePath) + "-.log");
    }

    /// <summary>The log file that was written last; the pattern where there is none.</summary>
    public static string Newest(string pattern)
    {
        string folder = Path.GetDirectoryName(pattern) ?? "";
        string name = Path.GetFileNameWithoutExtension(pattern) + "*" + Path.GetExtension(pattern);
        string? newest = new DirectoryInfo(Path.GetFullPath(folder.Length > 0 ? folder : "."))
            .GetFiles(name).OrderBy(file => file.LastWriteTimeUtc).LastOrDefault()?.Name;
        return newest is null ? pattern : Path.Combine(folder, newest);
    }

    public static Serilog.Core.Logger Make(string path) =>
        new LoggerConfiguration()
            .MinimumLevel.Information()
            .MinimumLevel.Override("Microsoft", LogEventLevel.Warning)
            .Enrich.FromLogContext()
            .WriteTo.File(
                new CompactJsonFormatter(), path, rollingInterval: RollingInterval.Day, fileSizeLimitBytes: FileBytesMax,
                rollOnFileSizeLimit: true, retainedFileCountLimit: 31)
            .WriteTo.Console(
                LogEventLevel.Error, standardErrorFromLevel: LogEventLevel.Verbose,
                formatProvider: CultureInfo.InvariantCulture,
                outputTemplate: "{Level:u4} {Message:lj}{NewLine}")
            .CreateLogger();
}
