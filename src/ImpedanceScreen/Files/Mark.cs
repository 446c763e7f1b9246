namespace ImpedanceScreen.Files;

/// <summary>A place in a text file.</summary>
/// <param name="Line">Line, counted from 1.</param>
/// <param name="Column">Column, counted from 1.</param>
public readonly record struct Mark(int Line, int Column);
