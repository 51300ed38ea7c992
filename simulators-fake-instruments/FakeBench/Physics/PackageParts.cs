namespace FakeBench.Physics;

/// <summary>What leads and package add in one place of the half bridge.</summary>
/// <param name="DrainInductance">High place: bus to drain, Lp. Low place: switch node to drain, Lm. H; above 0.</param>
/// <param name="EddyResistance">Across the high place's inductance, Rp, Ohm: eddy loss, most of the ring's damping;
/// unused in the low place.</param>
/// <param name="SourceInductance">Common to gate and power loop, Ls, H; above 0; acts in the low place only.</param>
/// <param name="SeriesResistance">In series with the whole high place, Ohm; unused in the low place.</param>
public sealed record PackageParts(
    double DrainInductance,
    double EddyResistance,
    double SourceInductance,
    double SeriesResistance);
