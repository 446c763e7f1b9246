namespace ImpedanceScreen.Estimation;

/// <summary>All inputs of a measurement, each with what it does to every reading near an estimate.</summary>
internal sealed class InputErrors
{
    private readonly StateMeasurement measurement;
    private readonly SourceModel[] models;

    /// <summary>Linearises the measurement at an estimate.</summary>
    /// <param name="measurement">The measurement.</param>
    /// <param name="sourceVolt">Vth, V.</param>
    /// <param name="ohm">All resistance ahead of the sensing point, Ω.</param>
    public InputErrors(StateMeasurement measurement, double sourceVolt, double ohm)
    {
        this.measurement = measurement;
        models = [.. measurement.Means.Select(mean =>
        {
            int load = measurement.LoadIndex(mean.Load);
            double siemens = load < 0 ? 0 : 1 / measurement.Paths[load].Ohm;
            return new SourceModel(sourceVolt, ohm, measurement.ReturnVolt, siemens, measurement.MeterSiemens);
        })];
    }

    /// <summary>The readings' sensitivity to Vth and to the resistance, point by point.</summary>
    public (double[] PerVolt, double[] PerOhm) Jacobian =>
        ([.. models.Select(model => model.PerSourceVolt)], [.. models.Select(model => model.PerOhm)]);

    /// <summary>Every input that is uncertain.</summary>
    public IEnumerable<InputError> All() =>
        Readings().Concat(MeterTerms()).Concat(LoadTerms()).Concat(WiringTerms()).Where(Matters);

    private static bool Matters(InputError input) =>
        input.Ohm != 0 || input.ReturnVolt != 0 || Array.Exists(input.Volt, volt => volt != 0);

    private IEnumerable<InputError> Readings()
    {
        for (int i = 0; i < models.Length; i++)
        {
            double[] noise = new double[models.Length];
            double[] resolution = new double[models.Length];
            noise[i] = measurement.NoiseOf(measurement.Means[i]);
            resolution[i] = measurement.ResolutionUncertaintyVolt;
            int degrees = measurement.Job.Range.NoiseDegreesOfFreedom;
            yield return new("noise", EvaluationType.A, InputDistribution.Normal, degrees, noise);
            yield return TypeB("resolution", InputDistribution.Rectangular, resolution);
        }
    }

    private IEnumerable<InputError> MeterTerms()
    {
        double shared = measurement.ReturnSharesMeter ? 1 : 0;
        double offset = measurement.OffsetUncertaintyVolt;
        double gain = measurement.Job.Range.GainLimit / Math.Sqrt(3);
        double input = measurement.MeterSiemens * measurement.Job.Range.InputLimit / Math.Sqrt(3);
        double back = measurement.ReturnVolt * gain * shared;
        yield return TypeB(
            "meter offset", InputDistribution.Rectangular, Column(m => offset * (1 - (shared * m.PerReturnVolt))))
            with { ReturnVolt = offset * shared };
        yield return TypeB(
            "meter gain", InputDistribution.Rectangular, Column(m => (m.Volt * gain) - (m.PerReturnVolt * back)))
            with { ReturnVolt = back, Weighs = false };
        yield return TypeB(
            "meter input resistance", InputDistribution.Rectangular, Column(m => m.PerMeterSiemens * input))
            with { Weighs = false };
    }

    private IEnumerable<InputError> LoadTerms()
    {
        for (int load = 0; load < measurement.Loads.Length; load++)
        {
            LoadPath path = measurement.Paths[load];
            int at = load;
            yield return TypeB(
                $"load {path.Load.Name}", InputDistribution.Normal,
                LoadColumn(index => index == at ? path.CertificateOhm : 0));
            yield return TypeB(
                "branch", InputDistribution.Normal, LoadColumn(index => index == at ? path.BranchOhm : 0));
        }

        foreach (CommonTerm term in measurement.Commons)
        {
            yield return TypeB(term.Name, term.Distribution, LoadColumn(load => term.Ohm[load]));
        }
    }

    private IEnumerable<InputError> WiringTerms()
    {
        double rail = measurement.ReturnUncertaintyVolt;
        yield return TypeB("return rail", InputDistribution.Normal, Column(m => m.PerReturnVolt * rail))
            with { ReturnVolt = -rail };
        yield return TypeB("lead", InputDistribution.Normal, Column(_ => 0))
            with { Ohm = measurement.SubtractedLeadOhm.StandardUncertainty, Weighs = false };
    }

    private static InputError TypeB(string name, InputDistribution distribution, double[] volt) =>
        new(name, EvaluationType.B, distribution, double.PositiveInfinity, volt);

    private double[] Column(Func<SourceModel, double> volt) => [.. models.Select(volt)];

    private double[] LoadColumn(Func<int, double> ohm) => [.. models.Select((model, i) =>
    {
        int load = measurement.LoadIndex(measurement.Means[i].Load);
        return load < 0 ? 0 : model.PerLoadOhm * ohm(load);
    })];
}
