
namespace BenchRunner.Acceptance.Tests.Files;

/// <summary>Where the files of the clone lie, found from where a test runs.</summary>
internal static class Repository
{
    public static string Root { get; } = Find();

    public static string PathOf(params string[] parts) => Path.Combine([Root, .. parts]);

    public static string SequencePath => PathOf("sequences", "winch-drive-incoming.yaml");

    public static string TolerancesPath => PathOf("sequences", "tolerances", "common-practice.yaml");

    public static string BenchPath => PathOf("sequences", "benches", "fake.yaml");

    private static string Find()
    {
        DirectoryInfo? folder = new(AppContext.BaseDirectory);
        while (folder is not null && !File.Exists(Path.Combine(folder.FullName, "BenchRunner.sln")))
        {
            folder = folder.Parent;
        }

        return folder?.FullName ?? throw new InvalidOperationException("the tests run outside a clone");
    }
}
