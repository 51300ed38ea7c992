namespace FakeBench.Physics;

/// <summary>Gaussian elimination in a fixed order, without pivoting, for one pattern of non-zeros.</summary>
/// <remarks>
/// The order and every index are found once, when the pattern is known: the pivot whose row and column are shortest
/// comes
/// first (Markowitz), ties by index. What is left for each matrix is a list of multiply-subtracts, so that equal inputs
/// give equal bits. No pivoting is sound for matrices whose diagonal is made large, as a stiff solver's is.
/// Safe on many threads: a matrix and a right side are the caller's own.
/// </remarks>
public sealed class SparseElimination
{
    private readonly int _size;
    private readonly int[] _pivots;
    private readonly int[][] _rowsBelow;
    private readonly int[][] _columnsRight;
    private readonly int[] _filled;

    /// <summary>Finds order and fill of a pattern.</summary>
    /// <param name="pattern">Row-major, size x size; true where an element may differ from 0. The diagonal is taken as
    /// non-zero.</param>
    /// <param name="size">Rows and columns; above 0.</param>
    public SparseElimination(bool[] pattern, int size)
    {
        ArgumentNullException.ThrowIfNull(pattern);
        ArgumentOutOfRangeException.ThrowIfNegativeOrZero(size);
        _size = size;
        var work = (bool[])pattern.Clone();
        for (int i = 0; i < size; i++) work[i * size + i] = true;
        var left = Enumerable.Range(0, size).ToList();
        _pivots = new int[size];
        _rowsBelow = new int[size][];
        _columnsRight = new int[size][];
        for (int k = 0; k < size; k++)
        {
            int pivot = left.MinBy(p => Rows(work, left, p).Length * Columns(work, left, p).Length);
            left.Remove(pivot);
            var rows = Rows(work, left, pivot);
            var columns = Columns(work, left, pivot);
            foreach (int row in rows)
            {
                foreach (int column in columns) work[row * size + column] = true;
            }

            (_pivots[k], _rowsBelow[k], _columnsRight[k]) = (pivot, rows, columns);
        }

        _filled = [.. Enumerable.Range(0, size * size).Where(i => work[i])];
    }

    /// <summary>Positions, in a row-major matrix, that may be non-zero after elimination.</summary>
    public ReadOnlySpan<int> Filled => _filled;

    /// <summary>Factors a matrix in place; the reciprocals of the pivots land on the diagonal.</summary>
    /// <param name="matrix">Row-major; zero outside the pattern.</param>
    public void Factor(Span<double> matrix)
    {
        for (int k = 0; k < _size; k++)
        {
            int pivot = _pivots[k];
            var pivotRow = matrix.Slice(pivot * _size, _size);
            double reciprocal = 1 / pivotRow[pivot];
            pivotRow[pivot] = reciprocal;
            var columns = _columnsRight[k];
            foreach (int row in _rowsBelow[k])
            {
                var target = matrix.Slice(row * _size, _size);
                double factor = target[pivot] * reciprocal;
                target[pivot] = factor;
                foreach (int column in columns) target[column] -= factor * pivotRow[column];
            }
        }
    }

    /// <summary>Solves with a factored matrix, in place.</summary>
    /// <param name="matrix">As <see cref="Factor"/> left it.</param>
    /// <param name="right">Right side in, solution out.</param>
    public void Solve(ReadOnlySpan<double> matrix, Span<double> right)
    {
        for (int k = 0; k < _size; k++)
        {
            int pivot = _pivots[k];
            double value = right[pivot];
            foreach (int row in _rowsBelow[k]) right[row] -= matrix[row * _size + pivot] * value;
        }

        for (int k = _size - 1; k >= 0; k--)
        {
            int pivot = _pivots[k];
            var pivotRow = matrix.Slice(pivot * _size, _size);
            double sum = right[pivot];
            foreach (int column in _columnsRight[k]) sum -= pivotRow[column] * right[column];
            right[pivot] = sum * pivotRow[pivot];
        }
    }

    private int[] Rows(bool[] pattern, List<int> left, int pivot) =>
        [.. left.Where(row => row != pivot && pattern[row * _size + pivot])];

    private int[] Columns(bool[] pattern, List<int> left, int pivot) =>
        [.. left.Where(column => column != pivot && pattern[pivot * _size + column])];
}
