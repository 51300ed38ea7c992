using System.Reflection;
using System.Runtime.CompilerServices;
using System.Xml.Linq;

namespace BenchRunner.Tests.Architecture;

/// <summary>The arrows of the house, by project references (unused ones too) and by the assemblies really
/// used.</summary>
public sealed class ArrowsTests
{
    private static readonly Dictionary<string, string[]> Arrows = new()
    {
        ["BenchRunner.Signals"] = [],
        ["BenchRunner.Acceptance"] = ["BenchRunner.Signals"],
        ["BenchRunner.Instruments"] = ["BenchRunner.Signals"],
        ["BenchRunner.Safety"] = ["BenchRunner.Instruments", "BenchRunner.Acceptance", "BenchRunner.Signals"],
        ["BenchRunner.Evidence"] = ["BenchRunner.Acceptance", "BenchRunner.Signals"],
        ["BenchRunner.Runner"] =
        [
            "BenchRunner.Acceptance", "BenchRunner.Instruments", "BenchRunner.Safety", "BenchRunner.Evidence",
            "BenchRunner.Signals",
        ],
    };

    public static TheoryData<string> Libraries => [.. Arrows.Keys];

    [Theory]
    [MemberData(nameof(Libraries))]
    public void A_project_references_only_what_its_arrows_allow(string project)
    {
        IEnumerable<string> references = ProjectReferences(Repository.File("src", project, project + ".csproj"));

        Assert.Empty(references.Except(Arrows[project]));
    }

    [Theory]
    [MemberData(nameof(Libraries))]
    public void An_assembly_uses_only_what_its_arrows_allow(string project)
    {
        IEnumerable<string> used = Assembly.Load(project).GetReferencedAssemblies()
            .Select(name => name.Name!)
            .Where(name => name.StartsWith("BenchRunner.", StringComparison.Ordinal));

        Assert.Empty(used.Except(Arrows[project]));
    }

    [Fact]
    public void Every_project_of_src_has_its_arrows_stated()
    {
        IEnumerable<string> projects = Directory.GetDirectories(Repository.File("src")).Select(Path.GetFileName)!;

        Assert.Equal(Arrows.Keys.Append("BenchRunner").Order(), projects.Order());
    }

    [Fact]
    public void The_fake_bench_and_the_program_share_no_code()
    {
        string fake = Repository.File("simulators-fake-instruments", "FakeBench", "FakeBench.csproj");
        Assert.Empty(ProjectReferences(fake));
        Assert.DoesNotContain("<Compile Include=\"..", File.ReadAllText(fake), StringComparison.Ordinal);

        XElement reference = XDocument.Load(Repository.File("src", "BenchRunner", "BenchRunner.csproj"))
            .Descendants("ProjectReference")
            .Single(e => e.Attribute("Include")!.Value.Contains("FakeBench", StringComparison.Ordinal));
        Assert.Equal("false", reference.Attribute("ReferenceOutputAssembly")?.Value);
        Assert.Equal("false", reference.Attribute("Private")?.Value);
    }

    [Theory]
    [MemberData(nameof(Libraries))]
    public void Only_instruments_has_a_friend_and_it_is_safety(string project)
    {
        IEnumerable<string> friends = Assembly.Load(project).GetCustomAttributes<InternalsVisibleToAttribute>()
            .Select(friend => friend.AssemblyName);

        Assert.Equal(project == "BenchRunner.Instruments" ? ["BenchRunner.Safety"] : Array.Empty<string>(), friends);
    }

    private static IEnumerable<string> ProjectReferences(string file) =>
        XDocument.Load(file).Descendants("ProjectReference")
            .Select(e => Path.GetFileNameWithoutExtension(e.Attribute("Include")!.Value.Replace('\\', '/')))
            .Where(name => !name.StartsWith("$(", StringComparison.Ordinal));
}
