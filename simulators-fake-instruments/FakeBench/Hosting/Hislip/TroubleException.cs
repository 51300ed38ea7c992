namespace FakeBench.Hosting.Hislip;

/// <summary>A message that the server does not obey, as it tells the client.</summary>
/// <param name="word">What is wrong, in one word.</param>
/// <param name="isFatal">Whether the session ends: the server cannot stay in step, or the client is not welcome.</param>
/// <param name="code">Code of the FatalError or Error.</param>
/// <param name="text">Text of it.</param>
public sealed class TroubleException(string word, bool isFatal, byte code, string text) : Exception(text)
{
    /// <summary>What is wrong, in one word.</summary>
    public string Word { get; } = word;

    /// <summary>What the client is told.</summary>
    public Frame Answer { get; } = new(
        isFatal ? Kind.FatalError : Kind.Error, code, 0, System.Text.Encoding.ASCII.GetBytes(text));

    /// <summary>Whether the session ends.</summary>
    public bool IsFatal { get; } = isFatal;

    /// <summary>The stream is out of step.</summary>
    public static TroubleException BadHeader() => new("poorly-formed-header", true, 1, "Poorly formed message header");

    /// <summary>Longer than the server takes; nothing of it was read.</summary>
    public static TroubleException TooLarge() => new("too-large", true, 0, "Message too large");

    /// <summary>Longer than the server said it takes; it was read and dropped.</summary>
    public static TroubleException LongerThanAgreed() => new("too-large", false, 4, "Message too large");

    /// <summary>The start is not as it must be.</summary>
    public static TroubleException BadStart() => new("out-of-sequence", true, 3, "Invalid initialization sequence");

    /// <summary>As many clients are served as can be.</summary>
    public static TroubleException Full() => new(
        "full", true, 4, "Server refused connection due to maximum number of clients exceeded");

    /// <summary>A message before the other channel is there.</summary>
    public static TroubleException OneChannel() => new(
        "channels", true, 2, "Attempt to use connection without both channels established");

    /// <summary>A kind that the server does not know, or not here.</summary>
    public static TroubleException UnknownKind(byte kind) => kind >= Kind.FirstOfVendors
        ? new("unrecognized-vendor-type", false, 3, "Unrecognized vendor defined message")
        : new("unrecognized-type", false, 1, "Unrecognized message type");

    /// <summary>A control code that its kind does not have.</summary>
    public static TroubleException UnknownControl() => new("control-code", false, 2, "Unrecognized control code");

    /// <summary>A payload of the wrong length.</summary>
    public static TroubleException BadPayload() => new("bad-payload", false, 0, "Payload of the wrong length");
}
