namespace BenchRunner.Evidence.Stores;

/// <summary>Which runs may begin, and which attempt they are.</summary>
internal static class RunRules
{
    private const string InLot =
        "from run r left join decision d on d.run = r.id and d.scoring = 0 " +
        "where r.lot = (select id from word where text = ?1) and r.device = ?2";

    public static RunRefusal? Refusal(SqlSession session, RunHeader header)
    {
        if (session.Value("select simulated from run order by id limit 1") is long simulated
            && simulated != 0 != header.Simulated)
        {
            return new RunRefusal(
                RunRefusalKind.MixedOrigin,
                $"the evidence file holds {Origin(!header.Simulated)} runs, and this run is " +
                $"{Origin(header.Simulated)}; name another evidence file.");
        }

        if (header.Lot is not { } lot)
        {
            return header.Again is null
                ? null
                : new RunRefusal(
                    RunRefusalKind.AgainWithoutLot,
                    "a reason to measure again (--again) is given without a lot, where nothing was decided before; "
                    + "name the lot (--lot L) or leave the reason out.");
        }

        const string going = $"select r.uid {InLot} and d.run is null order by r.id limit 1";
        if (session.Value(going, lot, header.Device) is { } run)
        {
            return new RunRefusal(
                RunRefusalKind.InFlight,
                $"{header.Device} has run {run} in lot {lot} that has not ended; end it first.");
        }

        long decided = Decided(session, header);
        if (decided >= header.Sequence.Attempts)
        {
            return new RunRefusal(
                RunRefusalKind.TooManyAttempts,
                $"{header.Device} had {decided} attempts in lot {lot}, and the sequence allows " +
                $"{header.Sequence.Attempts}; decide by what is there.");
        }

        if (decided > 0 && string.IsNullOrWhiteSpace(header.Again))
        {
            object? outcome = session.Value(
                "select outcome from device_outcomes where lot = ?1 and device = ?2 and current", lot, header.Device);
            return new RunRefusal(
                RunRefusalKind.AlreadyDecided,
                $"{header.Device} is {outcome} in lot {lot} already; say why it is measured again (--again REASON).");
        }

        return null;
    }

    /// <summary>Whether the device was decided in its lot; an attempt that was stopped decides nothing.</summary>
    public static bool IsDecided(SqlSession session, RunHeader header) => Decided(session, header) > 0;

    public static int Attempt(SqlSession session, RunHeader header) =>
        header.Lot is { } lot ? (int)session.Number($"select count(*) {InLot}", lot, header.Device) + 1 : 1;

    private static long Decided(SqlSession session, RunHeader header) =>
        session.Number($"select count(*) {InLot} and d.outcome <> 'stopped'", header.Lot, header.Device);

    private static string Origin(bool simulated) => simulated ? "simulated" : "measured";
}
