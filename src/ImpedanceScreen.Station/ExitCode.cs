namespace ImpedanceScreen.Station;

/// <summary>Exit codes, the same for every command; the README lists them.</summary>
internal static class ExitCode
{
    /// <summary>Done, and nothing found wrong: lot complete, board passed, files good, audit clean.</summary>
    public const int Done = 0;

    /// <summary>Done, and something is wrong: board failed, audit has findings.</summary>
    public const int Wrong = 1;

    /// <summary>Not begun: the command line or a file has mistakes, or the store or fixture cannot be had.</summary>
    public const int NotBegun = 2;

    /// <summary>The board is to be screened again, or its attempt was aborted.</summary>
    public const int Retest = 3;

    /// <summary>
    /// The bench waits for a person: relays not proved open, instrument lost, identity of a board unknown.
    /// </summary>
    public const int OnHold = 4;

    /// <summary>Records cannot be made durable.</summary>
    public const int StoreFault = 5;

    /// <summary>Told to stop: relays were opened, an attempt under way was recorded as aborted.</summary>
    public const int Stopped = 130;
}
