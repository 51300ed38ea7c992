using System.Linq.Expressions;
using System.Reflection;

namespace FakeBench.Physics;

/// <summary>Gaussian elimination in a fixed order, without pivoting, for one pattern of non-zeros.</summary>
/// <remarks>
/// The order and every index are found once, when the pattern is known: the pivot whose row and column are shortest
/// comes
/// first (Markowitz), ties by index. What is left for each matrix is a list of fused multiply-subtracts, which is
/// compiled once into straight code without loop or index: a solver of few states spends much of its time here. Equal
/// inputs give equal bits. No pivoting is sound for matrices whose diagonal is made large, as a stiff solver's is.
/// Safe on many threads: a matrix and a right side are the caller's own.
/// </remarks>
public sealed class SparseElimination
{
    private static readonly MethodInfo Fused = ((Func<double, double, double, double>)Math.FusedMultiplyAdd).Method;

    private readonly int _size;
    private readonly Action<double[]> _factor;
    private readonly Action<double[], double[]> _solve;

    /// <summary>Finds order and fill of a pattern.</summary>
    /// <param name="pattern">Row-major, size x size; true where an element may differ from 0. The diagonal is taken as
    /// non-zero.</param>
    /// <param name="size">Rows and columns; above 0.</param>
    public SparseElimination(bool[] pattern, int size)
    {
        ArgumentNullException.ThrowIfNull(pattern);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(size);
        _size = size;
        var pivots = Pivots((bool[])pattern.Clone());
        _factor = Factoring(pivots);
        _solve = Solving(pivots);
    }

    /// <summary>Factors a matrix in place; the reciprocals of the pivots land on the diagonal.</summary>
    /// <param name="matrix">Row-major; zero outside the pattern.</param>
    public void Factor(double[] matrix) => _factor(matrix);

    /// <summary>Solves with a factored matrix, in place.</summary>
    /// <param name="matrix">As <see cref="Factor"/> left it.</param>
    /// <param name="right">Right side in, solution out.</param>
    public void Solve(double[] matrix, double[] right) => _solve(matrix, right);

    private List<Pivot> Pivots(bool[] work)
    {
        var left = Enumerable.Range(0, _size).ToList();
        var pivots = new List<Pivot>();
        while (left.Count > 0)
        {
            int at = left.MinBy(p => Rows(work, left, p).Length * Columns(work, left, p).Length);
            left.Remove(at);
            var pivot = new Pivot(at, Rows(work, left, at), Columns(work, left, at));
            foreach (int row in pivot.RowsBelow)
            {
                foreach (int column in pivot.ColumnsRight) work[row * _size + column] = true;
            }

            pivots.Add(pivot);
        }

        return pivots;
    }

    private Action<double[]> Factoring(List<Pivot> pivots)
    {
        var matrix = Expression.Parameter(typeof(double[]));
        var factor = Expression.Variable(typeof(double));
        var code = new List<Expression>();
        foreach (var (at, rows, columns) in pivots)
        {
            var diagonal = Element(matrix, at, at);
            code.Add(Expression.Assign(diagonal, Expression.Divide(Expression.Constant(1.0), diagonal)));
            foreach (int row in rows)
            {
                var below = Element(matrix, row, at);
                code.Add(Expression.Assign(factor, Expression.Multiply(below, diagonal)));
                code.Add(Expression.Assign(below, factor));
                code.AddRange(columns.Select(column =>
                    Less(Element(matrix, row, column), factor, Element(matrix, at, column))));
            }
        }

        return Expression.Lambda<Action<double[]>>(Expression.Block([factor], code), matrix).Compile();
    }

    private Action<double[], double[]> Solving(List<Pivot> pivots)
    {
        var matrix = Expression.Parameter(typeof(double[]));
        var right = Expression.Parameter(typeof(double[]));
        ParameterExpression[] x = [.. Enumerable.Range(0, _size).Select(_ => Expression.Variable(typeof(double)))];
        var code = new List<Expression>();
        for (int i = _size - 1; i >= 0; i--) code.Add(Expression.Assign(x[i], At(right, i)));
        foreach (var (at, rows, _) in pivots)
        {
            code.AddRange(rows.Select(row => Less(x[row], Element(matrix, row, at), x[at])));
        }

        foreach (var (at, _, columns) in Enumerable.Reverse(pivots))
        {
            code.AddRange(columns.Select(column => Less(x[at], Element(matrix, at, column), x[column])));
            code.Add(Expression.Assign(x[at], Expression.Multiply(x[at], Element(matrix, at, at))));
        }

        for (int i = 0; i < _size; i++) code.Add(Expression.Assign(At(right, i), x[i]));
        return Expression.Lambda<Action<double[], double[]>>(Expression.Block(x, code), matrix, right).Compile();
    }

    /// <summary>target -= a b.</summary>
    private static BinaryExpression Less(Expression target, Expression a, Expression b) =>
        Expression.Assign(target, Expression.Call(Fused, Expression.Negate(a), b, target));

    private IndexExpression Element(ParameterExpression matrix, int row, int column) =>
        At(matrix, row * _size + column);

    private static IndexExpression At(ParameterExpression array, int index) =>
        Expression.ArrayAccess(array, Expression.Constant(index));

    private int[] Rows(bool[] pattern, List<int> left, int pivot) =>
        [.. left.Where(row => row != pivot && pattern[row * _size + pivot])];

    private int[] Columns(bool[] pattern, List<int> left, int pivot) =>
        [.. left.Where(column => column != pivot && pattern[pivot * _size + column])];

    private sealed record Pivot(int At, int[] RowsBelow, int[] ColumnsRight);
}
