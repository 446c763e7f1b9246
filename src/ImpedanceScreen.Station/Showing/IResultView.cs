using ImpedanceScreen.Recording;
using ImpedanceScreen.Screening.Lots;

namespace ImpedanceScreen.Station.Showing;

/// <summary>What a person or a script sees of a run.</summary>
internal interface IResultView : IDisposable
{
    /// <summary>Disposition of the last board; null before the first.</summary>
    Disposition? LastDisposition { get; }

    /// <summary>An attempt has its record. Called on the bench loop: quick, and never throwing.</summary>
    void Add(BoardRecord record);

    /// <summary>The run has ended.</summary>
    void End(LotEnd? end, TimeSpan elapsed);
}
