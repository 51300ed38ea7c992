using System.Globalization;
using System.Text;
using FakeBench.Instruments;

namespace FakeBench.Faults;

/// <summary>Faults of any instrument's link: <c>ROLE/NAME</c>, each with the role that it meets where none is
/// named.</summary>
public static class LinkFault
{
    public const string Refused = "refused";
    public const string Drops = "link-drops";
    public const string HalfOpen = "half-open";
    public const string Drip = "drip";
    public const string Halves = "halves";
    public const string LateReply = "late-reply";
    public const string ReplyTwice = "reply-twice";
    public const string ReplyLost = "reply-lost";
    public const string BlockCut = "block-cut";
    public const string BlockDigits = "block-digits";
    public const string BlockLong = "block-long";
    public const string Overload = "overload";
    public const string Garbage = "garbage";
    public const string WrongEnd = "wrong-end";
    public const string Echo = "echo";
    public const string QueueOverflow = "queue-overflow";
    public const string HardwareError = "hardware-error";
    public const string Reboot = "reboot";

    private const int CutBy = 7;

    /// <summary>How late the reply of <see cref="LateReply"/> is.</summary>
    public static TimeSpan Lateness { get; } = TimeSpan.FromSeconds(4);

    /// <summary>Time between two bytes of <see cref="Drip"/>.</summary>
    public static TimeSpan DripGap { get; } = TimeSpan.FromMilliseconds(200);

    /// <summary>Time between the two halves of a reply in <see cref="Halves"/>.</summary>
    public static TimeSpan HalvesGap { get; } = TimeSpan.FromMilliseconds(100);

    /// <summary>The faults, by name.</summary>
    public static IReadOnlyList<FaultKind> All { get; } =
    [
        new(Refused, Moment.Start, "nobody listens where the instrument should be") { Role = "scope" },
        new(Drops, Block(9), "the connection is reset in the middle of a reply: the scope's in a block") { Role = "scope" },
        new(HalfOpen, Volts(200), "from then on the link takes everything and gives nothing") { Role = "voltmeter" },
        new(Drip, Fire(3), "from then on replies come a byte every 200 ms") { Role = "scope" },
        new(Halves, Moment.Start, "replies come in two halves, 100 ms apart") { Role = "supply" },
        new(LateReply, Fire(3), "the next reply comes 4 s late") { Role = "scope" },
        new(ReplyTwice, Fire(3), "the next reply comes twice") { Role = "scope" },
        new(ReplyLost, Fire(3), "the next reply is lost") { Role = "pulser" },
        new(BlockCut, Block(9), "one block is 7 bytes shorter than it says") { Role = "scope" },
        new(BlockDigits, Block(9), "one block's head says #2x") { Role = "scope" },
        new(BlockLong, Block(9), "one block is 3 bytes longer than it says") { Role = "scope" },
        new(Overload, Volts(200), "from then on every number is 9.91E37") { Role = "voltmeter" },
        new(Garbage, Fire(3), "bytes that are no text stand in the next reply") { Role = "scope" },
        new(WrongEnd, Fire(3), "from then on replies end in CR") { Role = "scope" },
        new(Echo, Moment.Start, "everything that is sent comes back before the reply") { Role = "interlock" },
        new(QueueOverflow, Fire(3), "the error queue overflows: it ends in -350") { Role = "supply" },
        new(HardwareError, Moment.Start, "the error queue holds a hardware error (-240)") { Role = "supply" },
        new(Reboot, Fire(3), "the firmware starts anew: connections end, settings are those of power-on") { Role = "scope" },
    ];

    /// <summary>The name of a fault of one role's link.</summary>
    public static string Of(string role, string name) => $"{role}/{name}";

    /// <summary>Why a link cannot have a fault; null: it can.</summary>
    /// <param name="name">The fault.</param>
    /// <param name="link"><c>tcp</c>, <c>hislip</c> or <c>serial</c>.</param>
    public static string? Misfit(string name, string link) => (name, link) switch
    {
        (Drops, "serial") => "a serial line has no connection that could be reset; try half-open or reply-lost, or serve "
            + "the interlock with --interlock tcp",
        (WrongEnd, "hislip") => "a HiSLIP reply ends with its message and not with a character; serve it with --links tcp",
        (Echo, "hislip") => "HiSLIP has no terminal that could echo; serve it with --links tcp",
        _ => null,
    };

    /// <summary>What becomes of a reply on its way.</summary>
    /// <param name="role">Whose it is.</param>
    /// <param name="message">What it answers.</param>
    /// <param name="bytes">The reply; empty: none is due.</param>
    /// <param name="blocks">Blocks in it.</param>
    /// <param name="faults">What goes wrong.</param>
    public static Answer Spoil(string role, string message, byte[] bytes, int blocks, FaultPlan faults)
    {
        ArgumentNullException.ThrowIfNull(bytes);
        ArgumentNullException.ThrowIfNull(faults);
        bool Has(string name) => faults.Has(Of(role, name));
        if (Has(HalfOpen))
        {
            return new Answer([]) { Deaf = true };
        }

        byte[] echo = Has(Echo) ? Encoding.Latin1.GetBytes(message + "\n") : [];
        if (bytes.Length == 0)
        {
            return new Answer(echo);
        }

        bool Take(string name) => faults.Take(Of(role, name));
        bool cuts = (blocks > 0 || role != "scope") && Take(Drops);
        bytes = blocks > 0 ? OfBlock(bytes, Take) : OfText(bytes, Has, Take);
        if (Has(WrongEnd))
        {
            bytes[^1] = (byte)'\r';
        }

        byte[] all = Take(ReplyLost) ? [] : Take(ReplyTwice) ? [.. bytes, .. bytes] : bytes;
        return new Answer([.. echo, .. all])
        {
            CutShort = cuts,
            Late = Take(LateReply) ? Lateness : TimeSpan.Zero,
            Piece = Has(Drip) ? 1 : Has(Halves) ? (all.Length / 2) + 1 : 0,
            Gap = Has(Drip) ? DripGap : HalvesGap,
        };
    }

    private static byte[] OfBlock(byte[] bytes, Func<string, bool> take)
    {
        if (take(BlockCut))
        {
            return [.. bytes[..^(CutBy + 1)], (byte)'\n'];
        }

        if (take(BlockLong))
        {
            return [.. bytes[..^1], .. "abc"u8, (byte)'\n'];
        }

        return take(BlockDigits) ? [.. "#2x"u8, .. bytes[3..]] : bytes;
    }

    private static byte[] OfText(byte[] bytes, Func<string, bool> has, Func<string, bool> take)
    {
        string text = Encoding.Latin1.GetString(bytes);
        int last = text.LastIndexOf(';') + 1;
        bool isNumber = text.AsSpan(last).Contains('E')
            && double.TryParse(text.AsSpan(last), NumberStyles.Float, CultureInfo.InvariantCulture, out _);
        if (isNumber && has(Overload))
        {
            return [.. bytes[..last], .. "9.91E37\n"u8];
        }

        return take(Garbage) ? [.. bytes[..(bytes.Length / 2)], 0xff, 0x80, 0x02, .. bytes[(bytes.Length / 2)..]] : bytes;
    }

    private static Moment Fire(int n) => new(MomentKind.Fire, n);

    private static Moment Volts(double v) => new(MomentKind.Volts, v);

    private static Moment Block(int n) => new(MomentKind.Block, n);
}
