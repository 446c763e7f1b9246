using System.Globalization;
using System.Text;
using ImpedanceScreen.Fixtures;

namespace ImpedanceScreen.Benchmarks.Programs;

/// <summary>A log's far end that tells as soon as a line with certain words comes.</summary>
internal sealed class LineTrigger : TextWriter
{
    private readonly Lock gate = new();
    private string? words;
    private TaskCompletionSource come = new(TaskCreationOptions.RunContinuationsAsynchronously);

    /// <inheritdoc/>
    public override Encoding Encoding => Encoding.UTF8;

    /// <summary>What the log says when a coil goes on.</summary>
    public static string On(Relay relay) => Coil(relay, "true");

    /// <summary>What the log says when a coil goes off.</summary>
    public static string Off(Relay relay) => Coil(relay, "false");

    /// <summary>Ends at the next line that holds these words. One waiter at a time.</summary>
    public Task NextAsync(string line)
    {
        lock (gate)
        {
            words = line;
            come = new TaskCompletionSource(TaskCreationOptions.RunContinuationsAsynchronously);
            return come.Task;
        }
    }

    /// <inheritdoc/>
    public override void WriteLine(string? value)
    {
        lock (gate)
        {
            if (words is not null && value is not null && value.Contains(words, StringComparison.Ordinal))
            {
                words = null;
                come.SetResult();
            }
        }
    }

    private static string Coil(Relay relay, string on) => string.Create(
        CultureInfo.InvariantCulture, $"\"unit\":\"{relay.Unit}\",\"coil\":{relay.Coil},\"on\":{on}");
}
