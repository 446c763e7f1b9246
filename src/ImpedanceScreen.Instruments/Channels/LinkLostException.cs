namespace ImpedanceScreen.Instruments.Channels;

/// <summary>A link could not be opened, or the far end is gone.</summary>
public sealed class LinkLostException : Exception
{
    /// <summary>Makes the exception.</summary>
    /// <param name="message">Which link, and what to look at, for a person.</param>
    /// <param name="inner">What caused it.</param>
    public LinkLostException(string message, Exception? inner = null)
        : base(message, inner)
    {
    }
}
