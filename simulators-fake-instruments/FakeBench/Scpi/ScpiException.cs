namespace FakeBench.Scpi;

/// <summary>A program message unit that cannot be obeyed; it becomes one entry of the error queue.</summary>
/// <param name="number">Standard error number, e.g. −113.</param>
/// <param name="detail">What exactly, in the device's own words; null: nothing to add.</param>
public sealed class ScpiException(int number, string? detail = null) : Exception(StandardErrors.Text(number))
{
    /// <summary>Standard error number.</summary>
    public int Number { get; } = number;

    /// <summary>The device's own words.</summary>
    public string? Detail { get; } = detail;
}
