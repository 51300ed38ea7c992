namespace BenchRunner.Safety.Supervision;

/// <summary>Where a run stands as safety sees it.</summary>
public enum SupervisorState
{
    /// <summary>Nothing was polled yet.</summary>
    Unwatched,

    /// <summary>Watched; nothing has leave to charge the bus; the enclosure may be open.</summary>
    Idle,

    /// <summary>There is a permit; the off bias of the gates is not verified yet.</summary>
    Granted,

    /// <summary>There is a permit, and both gates are held off: the supply may be switched on.</summary>
    Biased,

    /// <summary>The supply was told to charge the bus.</summary>
    Energised,

    /// <summary>The bus is up, and there is a permit for a further point, whose off bias is not verified yet.</summary>
    Regranted,

    /// <summary>Without a trip on the way to the safe state.</summary>
    Discharging,

    /// <summary>The bus was proved down; bleeder and watch stay on.</summary>
    Down,

    /// <summary>Tripped, on the way to the safe state.</summary>
    Tripping,

    /// <summary>Tripped, the bus proved down.</summary>
    TrippedDown,

    /// <summary>Tripped, the bus not proved down: it counts as energised.</summary>
    TrippedUnproved,

    /// <summary>The run is over.</summary>
    Ended,
}
