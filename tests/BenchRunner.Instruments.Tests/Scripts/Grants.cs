using System.Runtime.CompilerServices;
using BenchRunner.Instruments.Permits;
using BenchRunner.Signals.Units;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>Permits for tests. Only Safety's code can grant one; a test reaches past the compiler, which no source of
/// the
/// program does.</summary>
internal static class Grants
{
    public static PermitBounds Bounds => new(
        "test point", new Volts(600), new Amperes(0.5), new Seconds(20e-6), new Volts(18), new Volts(-5));

    public static Permit Live(TimeProvider? time = null, PermitBounds? bounds = null) =>
        New(bounds ?? Bounds, time ?? TimeProvider.System, TimeSpan.FromMinutes(5));

    public static Permit Revoked(string because = "interlock open")
    {
        var permit = Live();
        Revoke(permit, because);
        return permit;
    }

    /// <summary>Whether another thread is kept from the permit at this moment, as it is while a guarded write goes
    /// on.</summary>
    public static bool IsHeld(Permit permit) => !Task.Run(() => permit.WhyNot).Wait(TimeSpan.FromMilliseconds(300));

    [UnsafeAccessor(UnsafeAccessorKind.Constructor)]
    private static extern Permit New(PermitBounds bounds, TimeProvider time, TimeSpan life);

    [UnsafeAccessor(UnsafeAccessorKind.Method, Name = "Revoke")]
    public static extern void Revoke(Permit permit, string because);
}
