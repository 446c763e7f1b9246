using ImpedanceScreen.Bench;
using ImpedanceScreen.Recording;

namespace ImpedanceScreen.Screening.Attempts;

/// <summary>How an attempt ended: its record, not yet appended, and whether the bench is safe.</summary>
/// <param name="Record">The record to append.</param>
/// <param name="AllOpen">Whether all relays were confirmed open at its end.</param>
/// <param name="Interruption">What ended it early; null where it ran to its end.</param>
public sealed record AttemptEnd(BoardRecord Record, AllOpenOutcome AllOpen, Exception? Interruption);
