namespace FakeBench.Physics;

/// <summary>Ordinary differential equations y' = f(t, y) with their derivatives, as <see cref="Rodas4"/> wants
/// them.</summary>
public interface IOdeSystem
{
    /// <summary>Number of states.</summary>
    int Size { get; }

    /// <summary>Elimination for the pattern of this system's Jacobian.</summary>
    SparseElimination Elimination { get; }

    /// <summary>Size of one "unit" of each state: the error norm is absolute.</summary>
    ReadOnlySpan<double> Scale { get; }

    /// <summary>The state whose sign decides between two sets of equations that meet where it is 0; negative: none.
    /// <see cref="Linearise"/> decides, and what it has decided holds until it is called again.</summary>
    int Turning => -1;

    /// <summary>Writes f(t, y).</summary>
    void Evaluate(double time, ReadOnlySpan<double> state, Span<double> derivative);

    /// <summary>Writes f(t, y), its Jacobian (row-major; zero outside the pattern stays untouched) and df/dt.</summary>
    void Linearise(double time, ReadOnlySpan<double> state, Span<double> derivative, Span<double> jacobian,
        Span<double> timeDerivative);
}
