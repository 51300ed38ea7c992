using System.Globalization;
using System.Text.Json;
using BenchRunner.Signals.Fitting;
using BenchRunner.Signals.Tests.Support;

namespace BenchRunner.Signals.Tests.Standards;

/// <summary>A data set of tests/reference/statistics as a problem of least squares.</summary>
internal sealed class NistSet : NormalEquations
{
    private readonly NistModel _model;

    private NistSet(string kind, string name, JsonElement certified)
        : base(certified.GetProperty("b").GetArrayLength())
    {
        _model = NistModels.Of(name);
        Certified = Numbers(certified.GetProperty("b"));
        Deviations = Numbers(certified.GetProperty("sd"));
        CertifiedSquares = certified.GetProperty("rss").GetDouble();
        string file = Path.Combine(Reference.Folder, "statistics", $"nist-{kind}-{name}.csv");
        double[][] rows = [.. File.ReadLines(file).Skip(1).Select(line => Array.ConvertAll(line.Split(','), Number))];
        X = [.. rows.Select(row => row[0])];
        Y = [.. rows.Select(row => row[1])];
    }

    public double[] X { get; }

    public double[] Y { get; }

    public double[] Certified { get; }

    public double[] Deviations { get; }

    public double CertifiedSquares { get; }

    public double[] Start { get; private init; } = [];

    /// <summary>Each residual is rounded by the data's last bits.</summary>
    public override double Rounding
    {
        get
        {
            double whole = Y.Sum(y => y * y);
            return (1e-15 * Math.Sqrt(whole * Squares)) + (1e-30 * whole);
        }
    }

    /// <summary>A nonlinear set, from its second start.</summary>
    public static NistSet Nonlinear(string name)
    {
        using JsonDocument file = Reference.Json($"statistics/nist-nonlinear-{name}.json");
        double[] start = Numbers(file.RootElement.GetProperty("start2"));
        return new NistSet("nonlinear", name, file.RootElement.GetProperty("certified")) { Start = start };
    }

    /// <summary>A linear set, from ones.</summary>
    public static NistSet Linear(string name)
    {
        using JsonDocument file = Reference.Json($"statistics/nist-linear-{name}.json");
        JsonElement certified = file.RootElement.GetProperty("certified");
        double[] start = Array.ConvertAll(Numbers(certified.GetProperty("b")), _ => 1.0);
        return new NistSet("linear", name, certified) { Start = start };
    }

    public override bool Evaluate(ReadOnlySpan<double> unknowns)
    {
        Squares = 0;
        Gradient.Clear();
        Curvature.Clear();
        double[] d = new double[Unknowns];
        for (int n = 0; n < X.Length; n++)
        {
            double residual = Y[n] - _model(unknowns, X[n], d);
            Squares += residual * residual;
            for (int i = 0; i < d.Length; i++)
            {
                Gradient[i] += d[i] * residual;
                for (int j = 0; j <= i; j++)
                {
                    Curvature[(i * d.Length) + j] += d[i] * d[j];
                }
            }
        }

        return double.IsFinite(Squares);
    }

    /// <summary>Standard deviations of the parameters at the point evaluated last.</summary>
    public double[] Spread()
    {
        double[] inverse = new double[Unknowns * Unknowns];
        Assert.True(Cholesky.Invert([.. Curvature], Unknowns, inverse));
        double variance = Squares / (X.Length - Unknowns);
        return [.. Enumerable.Range(0, Unknowns).Select(i => Math.Sqrt(variance * inverse[i * (Unknowns + 1)]))];
    }

    private static double Number(string cell) => double.Parse(cell, CultureInfo.InvariantCulture);

    private static double[] Numbers(JsonElement array) => [.. array.EnumerateArray().Select(item => item.GetDouble())];
}
