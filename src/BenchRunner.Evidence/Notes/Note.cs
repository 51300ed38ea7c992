namespace BenchRunner.Evidence.Notes;

/// <summary>What became of a device of a lot after its runs. Changes no outcome.</summary>
/// <param name="Device">Serial of the device; it has a run in the lot.</param>
/// <param name="Lot">The lot.</param>
/// <param name="Kind">What was done with it.</param>
/// <param name="By">Who says so.</param>
/// <param name="Because">Why.</param>
public sealed record Note(string Device, string Lot, NoteKind Kind, string By, string Because)
{
    /// <summary>The longest name and reason, characters.</summary>
    public const int LongestText = 1000;
}
