namespace ImpedanceScreen.Estimation;

/// <summary>One input of a measurement with what one standard uncertainty of it does.</summary>
/// <param name="Name">Name of the input; readings of one source of noise share a name.</param>
/// <param name="Type">How it was evaluated.</param>
/// <param name="Distribution">Its distribution.</param>
/// <param name="DegreesOfFreedom">Its degrees of freedom; infinite where known.</param>
/// <param name="Volt">For each load point, by how much the reading differs, V.</param>
/// <param name="ReturnVolt">By how much the assumed return voltage differs from the true one, V.</param>
/// <param name="Ohm">By how much the result differs directly, Ω (a lead that is subtracted).</param>
/// <param name="Weighs">True where the fit itself weighs it.</param>
internal sealed record InputError(
    string Name, EvaluationType Type, InputDistribution Distribution, double DegreesOfFreedom, double[] Volt,
    double ReturnVolt = 0, double Ohm = 0, bool Weighs = true);

/// <summary>What one standard uncertainty of an input does to the estimate.</summary>
/// <param name="Input">The input.</param>
/// <param name="Volt">Error of Vth, V, signed.</param>
/// <param name="Ohm">Error of Rth, Ω, signed.</param>
internal sealed record Contribution(InputError Input, double Volt, double Ohm);
