namespace EndToEnd;

/// <summary>Evidence of two runs of one device, taken once for all tests that read it.</summary>
public sealed class StoredCaptures : IAsyncLifetime
{
    /// <summary>The device of both runs.</summary>
    public const string Device = "W1200-0001";

    internal Workplace Place { get; } = new();

    /// <summary>Identities of the runs, the older one first.</summary>
    internal string[] Runs { get; private set; } = [];

    public async ValueTask InitializeAsync()
    {
        string sequence = Place.SequenceFile(("valid: 5, at-most: 20", "valid: 2, at-most: 8"));
        (await Place.Run("run", sequence, "--device", Device)).Expect(0);
        (await Place.Run("run", Place.OnePoint("half"), "--device", Device)).Expect(0);
        Runs = [.. Place.Rows("select run from device_outcomes order by started_at").Select(row => (string)row[0])];
    }

    public ValueTask DisposeAsync()
    {
        Place.Dispose();
        return ValueTask.CompletedTask;
    }
}
