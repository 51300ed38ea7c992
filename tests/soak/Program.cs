using System.Text.Json;

namespace BenchRunner.Soak;

/// <summary>The soak: <c>dotnet run -c Release --project tests/soak -- [--seed N] [--mixes M] [--json]</c>.</summary>
internal static class Program
{
    private const int WrongInput = 2;
    private static readonly JsonSerializerOptions _form = new(JsonSerializerDefaults.Web) { WriteIndented = true };

    private static int Main(string[] arguments)
    {
        if (Options.Read(arguments) is not { } options)
        {
            System.Console.Error.WriteLine(Options.Usage);
            return WrongInput;
        }

        List<Failure> failures = [];
        System.Console.Out.WriteLine(
            JsonSerializer.Serialize(new { mixes = 0, failures }, _form));
        return failures.Count == 0 ? 0 : 1;
    }
}
