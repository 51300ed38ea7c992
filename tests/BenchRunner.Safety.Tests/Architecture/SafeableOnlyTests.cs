using System.Reflection;
using System.Text.RegularExpressions;
using BenchRunner.Instruments.Permits;
using BenchRunner.Instruments.Roles;
using BenchRunner.Safety.Guardians;
using BenchRunner.Safety.Supervision;

namespace BenchRunner.Safety.Tests.Architecture;

/// <summary>What the guardian is handed can be made safe or read, and never energise or fire.</summary>
public sealed partial class SafeableOnlyTests
{
    private const BindingFlags All = BindingFlags.Instance | BindingFlags.Static | BindingFlags.Public
        | BindingFlags.NonPublic | BindingFlags.DeclaredOnly;

    private static readonly Type[] _energising =
        [typeof(Permit), typeof(PermitBounds), typeof(ISupply), typeof(IPulser), typeof(IInterlock), typeof(SafetySupervisor)];

    [Theory]
    [InlineData("BenchRunner.Safety.Guardians")]
    [InlineData("BenchRunner.Safety.SafeStates")]
    public void No_type_of_the_guardians_logic_knows_what_energises(string house)
    {
        Type[] types = [.. typeof(GuardianCore).Assembly.GetTypes().Where(type => type.Namespace == house)];

        Assert.NotEmpty(types);
        Assert.DoesNotContain(types.SelectMany(Known), type => _energising.Any(one => one.IsAssignableFrom(type)));
    }

    /// <summary>The same search finds what does energise where it may be known.</summary>
    [Fact]
    public void The_search_finds_what_the_supervisor_knows() => Assert.Contains(
        Known(typeof(SafetySupervisor)), type => type == typeof(Permit));

    [Theory]
    [InlineData("src/BenchRunner/Guards")]
    [InlineData("src/BenchRunner.Runner/Guarding")]
    public void No_source_of_the_guardians_process_names_what_energises(string folder)
    {
        string[] files = Directory.GetFiles(Benches.Repository.File(folder.Split('/')), "*.cs");

        Assert.NotEmpty(files);
        Assert.DoesNotContain(files, file => Energising().IsMatch(File.ReadAllText(file)));
    }

    /// <summary>Of fields, properties, parameters, results and locals; what an asynchronous method keeps is a field of a
    /// nested type, which has the same namespace.</summary>
    private static IEnumerable<Type> Known(Type type) =>
    [
        .. type.GetFields(All).Select(field => field.FieldType),
        .. type.GetMethods(All).SelectMany(Of),
        .. type.GetConstructors(All).SelectMany(Of),
    ];

    private static IEnumerable<Type> Of(MethodBase method) =>
    [
        .. method.GetParameters().Select(parameter => parameter.ParameterType),
        .. method is MethodInfo { ReturnType: var result } ? [result, .. result.GenericTypeArguments] : Array.Empty<Type>(),
        .. method.GetMethodBody()?.LocalVariables.Select(local => local.LocalType) ?? [],
    ];

    [GeneratedRegex(@"\b(I?Permit|PermitBounds|ISupply|IPulser|IGates|OutputOn|ReleaseBleeder|Fire)\b")]
    private static partial Regex Energising();
}
