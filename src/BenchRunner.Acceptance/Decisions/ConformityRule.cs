using BenchRunner.Acceptance.Sequences;

namespace BenchRunner.Acceptance.Decisions;

/// <summary>
/// How value, uncertainty and limits become a conformity (ISO 14253-1, JCGM 106 with guarded acceptance).
/// </summary>
public static class ConformityRule
{
    /// <summary>Width of the guard band, unit of the value: factor · U under the guarded rule, else 0.</summary>
    /// <param name="expanded">Expanded uncertainty U, unit of the value; 0 or more.</param>
    /// <param name="rule">The decision rule.</param>
    public static double GuardBand(double expanded, DecisionRule rule)
    {
        ArgumentNullException.ThrowIfNull(rule);
        return rule.Guarded ? rule.GuardFactor * expanded : 0;
    }

    /// <summary>Decides a value.</summary>
    /// <param name="value">The value.</param>
    /// <param name="expanded">Its expanded uncertainty U; null: not known, which leaves a guarded decision
    /// open.</param>
    /// <param name="lower">Lower limit; null: none.</param>
    /// <param name="upper">Upper limit; null: none.</param>
    /// <param name="rule">The decision rule.</param>
    /// <returns>
    /// Conforms inside the limits less the guard band w, fails outside the limits plus w, undecided between. A value on
    /// the limit conforms under the simple rule.
    /// </returns>
    public static Conformity Decide(double value, double? expanded, double? lower, double? upper, DecisionRule rule)
    {
        ArgumentNullException.ThrowIfNull(rule);
        if (!double.IsFinite(value) || (rule.Guarded && expanded is null))
        {
            return Conformity.Undecided;
        }

        double guard = GuardBand(expanded ?? 0, rule);
        double low = lower ?? double.NegativeInfinity;
        double high = upper ?? double.PositiveInfinity;
        if (value < low - guard || value > high + guard)
        {
            return Conformity.Fails;
        }

        return value >= low + guard && value <= high - guard ? Conformity.Conforms : Conformity.Undecided;
    }
}
