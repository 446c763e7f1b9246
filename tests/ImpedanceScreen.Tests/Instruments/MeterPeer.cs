using System.Text;
using System.Threading.Channels;
using ImpedanceScreen.Instruments.Channels;

namespace ImpedanceScreen.Tests.Instruments;

/// <summary>A SCPI meter in this process that misbehaves on request.</summary>
internal sealed class MeterPeer
{
    public const string DefaultIdentity = "EXAMPLE,VOLTMETER,1234,1.0";

    private readonly Channel<string> received = Channel.CreateUnbounded<string>();
    private IByteChannel? channel;

    public string Identity { get; set; } = DefaultIdentity;

    /// <summary>Every message in order.</summary>
    public List<string> Messages { get; } = [];

    public Queue<string> Errors { get; } = new();

    /// <summary>
    /// Numbers of readings taken: the answers are 1, 2, 3 … unless <see cref="NextAnswers"/> holds one.
    /// </summary>
    public int Readings { get; private set; }

    /// <summary>Answers to the next readings; null keeps silent.</summary>
    public Queue<string?> NextAnswers { get; } = new();

    public string Terminator { get; set; } = "\n";

    /// <summary>Waits until a reading was asked for that was not waited for yet.</summary>
    public Task ReceivedAsync() => received.Reader.ReadAsync().AsTask().WaitAsync(TimeSpan.FromSeconds(20));

    public async Task SendAsync(string text) =>
        await channel!.WriteAsync(Encoding.ASCII.GetBytes(text), CancellationToken.None);

    public async Task ServeAsync(IByteChannel connected)
    {
        channel = connected;
        var buffer = new byte[256];
        var line = new StringBuilder();
        while (true)
        {
            int count = await connected.ReadAsync(buffer, CancellationToken.None);
            foreach (char c in Encoding.ASCII.GetString(buffer, 0, count))
            {
                if (c != '\n')
                {
                    line.Append(c);
                    continue;
                }

                string message = line.ToString();
                line.Clear();
                Messages.Add(message);
                string? answer = Answer(message);
                if (answer is not null)
                {
                    await SendAsync(answer + Terminator);
                }

                if (message.StartsWith("READ?", StringComparison.Ordinal))
                {
                    received.Writer.TryWrite(message);
                }
            }
        }
    }

    private string? Answer(string message)
    {
        string[] units = message.Split(';');
        if (units.All(unit => unit == "READ?"))
        {
            return Read(units.Length);
        }

        switch (message)
        {
            case "*IDN?":
                return Identity;
            case "SYST:ERR?":
                return Errors.TryDequeue(out string? error) ? error : "+0,\"No error\"";
            case "*CLS":
                return null;
            default:
                if (!message.StartsWith("SENS:VOLT:DC:", StringComparison.Ordinal) && message != "CONF:VOLT:DC")
                {
                    Errors.Enqueue("-113,\"Undefined header\"");
                }

                return null;
        }
    }

    // One answer a program message unit, parted by semicolons (IEEE 488.2 section 8.4).
    private string? Read(int count)
    {
        IEnumerable<string> own = Enumerable.Range(Readings + 1, count).Select(number => $"+{number}.00000000E+00");
        string together = string.Join(';', own);
        Readings += count;
        return NextAnswers.TryDequeue(out string? answer) ? answer : together;
    }
}
