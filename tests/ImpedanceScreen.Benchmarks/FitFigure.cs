using System.Diagnostics;
using System.Globalization;
using ImpedanceScreen.Estimation;
using ImpedanceScreen.Jobs;
using ImpedanceScreen.Planning;
using ImpedanceScreen.Reference;

namespace ImpedanceScreen.Benchmarks;

/// <summary>
/// The estimator's speed against MathNet.Numerics' Levenberg-Marquardt on the same problems, and its allocation.
/// </summary>
internal sealed class FitFigure : IFigureCommand
{
    private const double RatioWanted = 240;
    private const int Problems = 64;
    private const int Blocks = 40;

    public string Name => "fit";

    public string Description => "Fits of six points with load and offset terms against MathNet's Levenberg-Marquardt.";

    public int DefaultCount => 500_000;

    public Task<int> RunAsync(int count, ulong seed, CancellationToken cancellation)
    {
        var random = new Random((int)(seed % int.MaxValue));
        FitCase[] cases = [.. Enumerable.Range(0, Problems).Select(_ => FitCase.Draw(random))];
        ReferenceFit[] references = [.. cases.Select(drawn => new ReferenceFit(drawn))];
        SourceFit[] fits = [.. cases.Select(drawn => SourceFitter.Fit(drawn.Problem))];
        double worst = Enumerable.Range(0, Problems).Max(i => Difference(references[i], fits[i]));

        // Short alternating blocks, the best of each: what else the machine does hits both or neither.
        SecondsPerFit(cases, count);
        int ownBlock = Math.Max(Problems, count / 20);
        int referenceBlock = Math.Max(Problems, count / 5000);
        double own = double.PositiveInfinity;
        double reference = double.PositiveInfinity;
        for (int block = 0; block < Blocks; block++)
        {
            cancellation.ThrowIfCancellationRequested();
            own = Math.Min(own, SecondsPerFit(cases, ownBlock));
            reference = Math.Min(reference, SecondsPerReference(references, fits, referenceBlock));
        }

        long before = GC.GetAllocatedBytesForCurrentThread();
        SecondsPerFit(cases, count);
        double bytes = (GC.GetAllocatedBytesForCurrentThread() - before) / (double)count;
        double ratio = reference / own;
        Console.WriteLine(string.Create(CultureInfo.InvariantCulture, $"""
            largest difference of Vth, Rth, chi-squared and p-value   {worst:E1}
            mean linearisations a fit        {fits.Average(fit => fit.Iterations):F2}
            MathNet Levenberg-Marquardt      {1 / reference:N0} fits/s
            estimate                         {1 / own:N0} fits/s
            ratio                            {ratio:F0} (wanted: at least {RatioWanted:F0})
            allocated per estimate           {bytes:F3} bytes (wanted: 0)
            a state's result, with budget    {1e6 * SecondsPerResult():F0} µs (once a record)
            """));
        return Task.FromResult(ratio >= RatioWanted && bytes == 0 && worst < 1e-8 ? 0 : 1);
    }

    private static double SecondsPerFit(FitCase[] cases, int count)
    {
        double sum = 0;
        long start = Stopwatch.GetTimestamp();
        for (int i = 0; i < count; i++)
        {
            sum += SourceFitter.Fit(cases[i % Problems].Problem).PValue;
        }

        double seconds = Stopwatch.GetElapsedTime(start).TotalSeconds / count;
        return double.IsNaN(sum) ? throw new InvalidOperationException("A fit did not converge.") : seconds;
    }

    private static double SecondsPerReference(ReferenceFit[] references, SourceFit[] fits, int count)
    {
        long start = Stopwatch.GetTimestamp();
        for (int i = 0; i < count; i++)
        {
            SourceFit fit = fits[i % Problems];
            var found = references[i % Problems].Fit(fit.SourceVoltageVolt * 1.001, fit.ResistanceOhm * 1.01);
            references[i % Problems].PValue(found.ChiSquared);
        }

        return Stopwatch.GetElapsedTime(start).TotalSeconds / count;
    }

    // Budget, diagnosis and decisions beside the fit.
    private static double SecondsPerResult()
    {
        const int Count = 200;
        StateJob job = SourceBench.Job();
        IReadOnlyList<LoadPointReadings> readings = new SourceBench().Read(job, 5, 100);
        double best = double.PositiveInfinity;
        for (int block = 0; block < Blocks; block++)
        {
            long start = Stopwatch.GetTimestamp();
            for (int i = 0; i < Count; i++)
            {
                StateEvaluation.Evaluate(job, readings, new(26, 0.3), 40, SourceBench.Start);
            }

            best = Math.Min(best, Stopwatch.GetElapsedTime(start).TotalSeconds / Count);
        }

        return best;
    }

    private static double Difference(ReferenceFit reference, SourceFit fit)
    {
        var found = reference.Fit(fit.SourceVoltageVolt * 1.001, fit.ResistanceOhm * 1.01);
        double[] parts =
        [
            (found.Volt / fit.SourceVoltageVolt) - 1,
            (found.Ohm / fit.ResistanceOhm) - 1,
            (found.ChiSquared / fit.ChiSquared) - 1,
            (reference.PValue(found.ChiSquared) / fit.PValue) - 1,
        ];
        return parts.Max(Math.Abs);
    }
}
