using System.Text;

namespace ImpedanceScreen.Benchmarks.Programs;

/// <summary>A log's far end that tells as soon as a line with certain words comes.</summary>
internal sealed class LineTrigger : TextWriter
{
    private readonly Lock gate = new();
    private string? words;
    private TaskCompletionSource come = new(TaskCreationOptions.RunContinuationsAsynchronously);

    /// <inheritdoc/>
    public override Encoding Encoding => Encoding.UTF8;

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
}
