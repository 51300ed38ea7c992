using System.Security.Cryptography;
using System.Text;
using BenchRunner.Acceptance.Benches;

namespace BenchRunner.Runner.Benches;

/// <summary>The lock that a bench's own connections take on an instrument whose link has locks (HiSLIP), so that no second
/// controller changes a setting.</summary>
/// <remarks>
/// Where an instrument serves one connection, the lock is exclusive. Where it serves more, runner, watch and guardian
/// each have one, and the guardian is another process: they share a lock by its name. The name is formed of the computer
/// and the bench file, so another computer with a copy of the file is kept out too.
/// </remarks>
public static class LinkLock
{
    private const int NameBytes = 8;

    /// <summary>Name of the lock on the instrument of a role; empty: exclusive.</summary>
    /// <param name="bench">The bench.</param>
    /// <param name="role">The role.</param>
    public static string Of(Bench bench, string role)
    {
        ArgumentNullException.ThrowIfNull(bench);
        if (bench.Roles[role].Connections < 2)
        {
            return "";
        }

        string place = $"{Environment.MachineName}\n{Path.GetFullPath(bench.Source.Path)}";
        byte[] hash = SHA256.HashData(Encoding.UTF8.GetBytes(place));
        return $"benchrunner-{Convert.ToHexStringLower(hash.AsSpan(0, NameBytes))}";
    }
}
