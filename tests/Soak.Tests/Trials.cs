using BenchRunner.Soak.Mixes;
using FakeBench.Faults;
using FakeBench.Fixtures;

namespace BenchRunner.Soak.Tests;

/// <summary>Trials in a folder of their own.</summary>
internal sealed class Trials : IDisposable
{
    private readonly string _folder = Directory.CreateTempSubdirectory("soak-tests-").FullName;
    private readonly TrainCache _trains = new(48);

    /// <summary>Runs the mix of a seed.</summary>
    public Judged OfSeed(ulong seed) => Trial.Run(Mix.Of(seed), _trains, _folder);

    /// <summary>Runs a sound device under faults, each as the command line names it.</summary>
    /// <param name="faults">The faults.</param>
    /// <param name="judge">Looks at what is left; null: the soak's own judgement.</param>
    public Judged Under(string[] faults, Func<Facts, IEnumerable<string>>? judge = null) => Of(Alone(faults), judge);

    /// <summary>The mix of a sound device under faults, uninterrupted.</summary>
    public static Mix Alone(string[] faults) => Mix.Of(1).Under([.. faults.Select(Fault.Parse)]);

    /// <summary>Runs a mix.</summary>
    public Judged Of(Mix mix, Func<Facts, IEnumerable<string>>? judge = null) => Trial.Run(mix, _trains, _folder, judge);

    public void Dispose() => Directory.Delete(_folder, recursive: true);
}
