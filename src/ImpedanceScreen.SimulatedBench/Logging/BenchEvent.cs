using System.Text.Json.Serialization;

namespace ImpedanceScreen.SimulatedBench.Logging;

/// <summary>Something that happened at the bench.</summary>
[JsonPolymorphic(TypeDiscriminatorPropertyName = "event")]
[JsonDerivedType(typeof(CoilChanged), "coil")]
[JsonDerivedType(typeof(InputChanged), "input")]
[JsonDerivedType(typeof(ReadingTaken), "reading")]
[JsonDerivedType(typeof(LineUsed), "line")]
[JsonDerivedType(typeof(BoardPresented), "board-presented")]
[JsonDerivedType(typeof(BoardLifted), "board-lifted")]
public abstract record BenchEvent
{
    /// <summary>When, ms on the monotonic clock since the bench started.</summary>
    [JsonPropertyOrder(-2)]
    public double Ms { get; init; }

    /// <summary>When, UTC.</summary>
    [JsonPropertyOrder(-1)]
    public DateTimeOffset Utc { get; init; }
}

/// <summary>A coil changed.</summary>
/// <param name="Unit">Name of its relay unit.</param>
/// <param name="Coil">Its address.</param>
/// <param name="On">Whether it is on now.</param>
/// <param name="Cause"><c>command</c> or <c>watchdog</c>.</param>
public sealed record CoilChanged(string Unit, ushort Coil, bool On, string Cause) : BenchEvent;

/// <summary>Board-present or interlock changed.</summary>
/// <param name="Input"><c>board-present</c> or <c>interlock</c>.</param>
/// <param name="On">Whether it is on now.</param>
public sealed record InputChanged(string Input, bool On) : BenchEvent;

/// <summary>A meter took a reading; <see cref="BenchEvent.Ms"/> is when its answer was ready.</summary>
/// <param name="Meter">Name of the meter.</param>
/// <param name="StartMs">When the integration began, ms.</param>
/// <param name="IntegrationMs">How long it integrated in real time, ms.</param>
/// <param name="TurnaroundMs">What came on top of the integration, ms.</param>
/// <param name="Answer">The answer.</param>
public sealed record ReadingTaken(
    string Meter, double StartMs, double IntegrationMs, double TurnaroundMs, string Answer) : BenchEvent;

/// <summary>One exchange over a serial line.</summary>
/// <param name="Link">Name of the link.</param>
/// <param name="BytesIn">Bytes of the request.</param>
/// <param name="BytesOut">Bytes of the answer.</param>
/// <param name="CharacterMs">What one byte takes on the line, ms.</param>
public sealed record LineUsed(string Link, int BytesIn, int BytesOut, double CharacterMs) : BenchEvent;

/// <summary>The handler put a board into the nest.</summary>
/// <param name="Ordinal">Its number, from 1.</param>
/// <param name="Label">Its serial number.</param>
public sealed record BoardPresented(long Ordinal, string Label) : BenchEvent;

/// <summary>A board left the nest.</summary>
/// <param name="Ordinal">Its number.</param>
/// <param name="Label">Its serial number.</param>
/// <param name="Bin"><c>pass</c>, <c>fail</c> or <c>retest</c> by the coils; <c>none</c> where it was taken by
/// hand.</param>
public sealed record BoardLifted(long Ordinal, string Label, string Bin) : BenchEvent;
