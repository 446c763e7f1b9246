namespace ImpedanceScreen.Tests.Instruments.Peers;

/// <summary>Two pseudo-terminals back to back: a serial line without hardware.</summary>
internal sealed class TerminalPair : IAsyncDisposable
{
    private readonly PeerProcess socat;
    private readonly DirectoryInfo folder;

    private TerminalPair(PeerProcess socat, DirectoryInfo folder)
    {
        this.socat = socat;
        this.folder = folder;
    }

    public string Near => Path.Combine(folder.FullName, "near");

    public string Far => Path.Combine(folder.FullName, "far");

    public static async Task<TerminalPair> OpenAsync()
    {
        DirectoryInfo made = Directory.CreateTempSubdirectory("terminals");
        string near = Path.Combine(made.FullName, "near");
        string far = Path.Combine(made.FullName, "far");
        PeerProcess running = await PeerProcess.StartUntilAsync(
            () => File.Exists(near) && File.Exists(far),
            "socat",
            "socat",
            $"pty,raw,echo=0,link={near}",
            $"pty,raw,echo=0,link={far}");
        return new TerminalPair(running, made);
    }

    /// <summary>Pulls the cable.</summary>
    public ValueTask CutAsync() => socat.DisposeAsync();

    public async ValueTask DisposeAsync()
    {
        await socat.DisposeAsync();
        folder.Delete(recursive: true);
    }
}
