using BenchRunner.Instruments.Permits;
using Microsoft.CodeAnalysis;
using Microsoft.CodeAnalysis.CSharp;

namespace BenchRunner.Instruments.Tests.Permits;

/// <summary>Sources compiled against the built assemblies: without a permit nothing that energises compiles.</summary>
public class PermitCompilationTests
{
    private static readonly string[] Energising =
    [
        "supply.Program({0}new Volts(400), new Amperes(0.1), new Volts(440), cancel)",
        "supply.OutputOn({0}cancel)",
        "pulser.Program({0}new TrainSettings(new Seconds(1e-6), new Seconds(1e-6), new Seconds(1e-6), new Volts(18), "
            + "new Volts(-4)), cancel)",
        "pulser.Arm({0}cancel)",
        "pulser.Fire({0}cancel)",
        "interlock.ReleaseBleeder({0}cancel)",
    ];

    public static TheoryData<string> Calls => [.. Energising];

    [Theory]
    [MemberData(nameof(Calls))]
    public void What_energises_does_not_compile_without_a_permit_and_its_twin_with_one_does(string call)
    {
        Assert.Empty(Errors(Method(Format(call, "permit, "))));

        var errors = Errors(Method(Format(call, "")));
        Assert.NotEmpty(errors);

        // CS7036: a required argument is missing; CS1501: no overload takes so few; CS1503: wrong argument.
        Assert.All(errors, e => Assert.Contains(e, new[] { "CS7036", "CS1501", "CS1503" }));
    }

    [Theory]
    // No constructor that it can reach.
    [InlineData("new Permit(bounds, TimeProvider.System, TimeSpan.FromDays(1))", "CS1729")]
    [InlineData("new Permit()", "CS1729")]
    [InlineData("new MyPermit()", "CS0246")]
    [InlineData("null", "CS8625")] // nullable analysis, an error in this house
    [InlineData("default", "CS8625")]
    [InlineData("permit with { }", "CS8858")] // no record
    public void A_permit_cannot_be_made_up(string forged, string refusal) =>
        Assert.Contains(refusal, Errors(Method($"supply.OutputOn({forged}, cancel)")));

    [Fact]
    public void A_permit_cannot_be_derived_from() =>
        Assert.Contains("CS0509", Errors("public class Forged : BenchRunner.Instruments.Permits.Permit { }"));

    [Theory]
    [InlineData("permit.Renew()")]
    [InlineData("permit.Guard(() => { })")]
    [InlineData("permit.Revoke(\"\")")]
    public void Only_safety_renews_revokes_and_guards(string call) =>
        Assert.Contains("CS1061", Errors(Method(call)));

    [Fact]
    public void One_friend_alone_reaches_the_constructor() =>
        Assert.Equal(
            ["BenchRunner.Safety"],
            typeof(Permit).Assembly.GetCustomAttributesData()
                .Where(a => a.AttributeType.Name == "InternalsVisibleToAttribute")
                .Select(a => (string)a.ConstructorArguments[0].Value!));

    [Fact]
    public void Every_operation_that_energises_is_tried_here()
    {
        var taking = new[] { typeof(Instruments.Roles.ISupply), typeof(Instruments.Roles.IPulser),
            typeof(Instruments.Roles.IInterlock) }
            .SelectMany(t => t.GetMethods())
            .Where(m => m.GetParameters().Any(p => p.ParameterType == typeof(Permit)));
        Assert.Equal(Energising.Length, taking.Count());
    }

    private static string Format(string call, string permit) => call.Replace("{0}", permit, StringComparison.Ordinal);

    private static string Method(string call) => $$"""
        #nullable enable
        using System;
        using System.Threading;
        using BenchRunner.Instruments.Permits;
        using BenchRunner.Instruments.Roles;
        using BenchRunner.Signals.Units;
        public static class Source
        {
            public static void Do(
                ISupply supply, IPulser pulser, IInterlock interlock, Permit permit, PermitBounds bounds,
                CancellationToken cancel)
            {
                _ = {{(call.StartsWith("permit.", StringComparison.Ordinal) ? $"0; {call}" : call)}};
            }
        }
        """;

    private static readonly MetadataReference[] References =
    [
        .. ((string)AppContext.GetData("TRUSTED_PLATFORM_ASSEMBLIES")!).Split(Path.PathSeparator)
            .Where(p => Path.GetFileName(p) is var name
                && (name.StartsWith("System.", StringComparison.Ordinal)
                    || name.StartsWith("BenchRunner.", StringComparison.Ordinal)))
            .Select(p => MetadataReference.CreateFromFile(p)),
    ];

    private static string[] Errors(string source)
    {
        var options = new CSharpCompilationOptions(
            OutputKind.DynamicallyLinkedLibrary,
            generalDiagnosticOption: ReportDiagnostic.Error,
            nullableContextOptions: NullableContextOptions.Enable);
        var compilation = CSharpCompilation.Create(
            "Stranger",
            [CSharpSyntaxTree.ParseText(source)],
            References,
            options);
        return [.. compilation.GetDiagnostics().Where(d => d.Severity == DiagnosticSeverity.Error).Select(d => d.Id)];
    }
}
