using System.Text.RegularExpressions;
using BenchRunner.Acceptance.Benches;
using BenchRunner.Acceptance.Files;
using BenchRunner.Acceptance.Plans;
using BenchRunner.Acceptance.Sequences;
using BenchRunner.Signals.Traces;

namespace BenchRunner.Acceptance.Tests.Plans;

/// <summary>Plans that must be refused, and say where, what was found, what was expected and what to do.</summary>
internal static partial class Refusals
{
    [GeneratedRegex(@"^.+\.yaml(:\d+:\d+)?: .+; expected .+; .+\.$")]
    private static partial Regex Form();

    internal static void Refused(Sequence sequence, Bench bench, params string[] words)
    {
        IReadOnlyList<Problem> refusals = Planner.Plan(sequence, bench).Refusals;
        string all = string.Join('\n', refusals);
        Assert.Contains(refusals, problem =>
            words.All(word => problem.ToString().Contains(word, StringComparison.Ordinal)));
        Assert.True(refusals.Count <= 2, all);
        Assert.All(refusals, problem => Assert.Matches(Form(), problem.ToString()));
    }

    internal static void Refused(Func<OperatingPoint, OperatingPoint> change, params string[] words) =>
        Refused(Shipped.With(change), Shipped.Bench, words);

    internal static void Refused(Func<Bench, Bench> change, params string[] words) =>
        Refused(Shipped.Rated, change(Shipped.Bench), words);

    internal static Bench With(Channel channel, Func<ChannelSetup, ChannelSetup> change) => Shipped.Bench with
    {
        Channels = [.. Shipped.Bench.Channels.Select(setup => setup.Channel == channel ? change(setup) : setup)],
    };

    internal static Bench Without(Channel channel) => Shipped.Bench with
    {
        Channels = [.. Shipped.Bench.Channels.Where(setup => setup.Channel != channel)],
    };

    internal static Bench With(string role, Func<InstrumentSetup, InstrumentSetup> change) => Shipped.Bench with
    {
        Roles = Shipped.Bench.Roles.ToDictionary(
            pair => pair.Key, pair => pair.Key == role ? change(pair.Value) : pair.Value),
    };

    internal static Sequence Limited(string quantity, double? lower = null, double? upper = 1e-3) => Shipped.Rated with
    {
        Limits = [Shipped.Rated.Limits[0] with { Quantity = quantity, Lower = lower, Upper = upper }],
    };
}
