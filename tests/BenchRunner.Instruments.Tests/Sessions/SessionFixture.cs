using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;
using BenchRunner.Instruments.Sessions;
using BenchRunner.Instruments.Tests.Scripts;

namespace BenchRunner.Instruments.Tests.Sessions;

/// <summary>A session with a scripted instrument, whose time the test moves.</summary>
public abstract class SessionFixture : IAsyncLifetime
{
    // An hour of the test's clock: no step of a drain can reach it by accident.
    private protected static readonly SessionOptions Options = new()
    {
        ReplyWithin = TimeSpan.FromHours(1),
        ConnectWithin = TimeSpan.FromHours(1),
        WriteWithin = TimeSpan.FromSeconds(30),
        Silence = TimeSpan.FromSeconds(1),
        ReadAttempts = 1,
        ConnectAttempts = 1,
    };

    private protected Clock Time { get; } = new();

    private protected Recorder Log { get; } = new();

    private protected ScriptedInstrument Instrument { get; } = new();

    private protected CancellationToken Cancel { get; } = TestContext.Current.CancellationToken;

    public ValueTask InitializeAsync()
    {
        Instrument.On("B?", "2");
        Instrument.Keep("VOLT", "VOLT?", "0");
        return ValueTask.CompletedTask;
    }

    public ValueTask DisposeAsync()
    {
        GC.SuppressFinalize(this);
        return Instrument.DisposeAsync();
    }

    private protected Task<ScpiSession> Open(SessionOptions? options = null) =>
        ScpiSession.Open("supply", Instrument.Address, options ?? Options, Time, Log, Cancel);

    private protected Task<double> Ask(ScpiSession session, string query, CancellationToken? cancel = null) =>
        session.Ask(query, ReplyNumber.Parse, cancel ?? Cancel).AsTask();

    private protected Task<byte[]> AskBlock(ScpiSession session, int bound = 1024, CancellationToken? cancel = null) =>
        session.AskBlock("D?", bound, b => b.ToArray(), cancel ?? Cancel).AsTask();

    /// <summary>Lets the deadline of an exchange pass, once its question has reached the instrument.</summary>
    private protected async Task LetTimeOut(Task exchange, string question)
    {
        var before = Instrument.Count(question);
        await Clock.Until(() => Instrument.Count(question) > 0 || before > 0);
        Time.Advance(Options.ReplyWithin * 2);
        await Assert.ThrowsAsync<LinkException>(() => exchange);
    }

    /// <summary>The answer to B?, after whatever silences the session has to wait for.</summary>
    private protected async Task<double> AskB(ScpiSession session)
    {
        var answer = Ask(session, "B?");
        await Time.PassUntil(Options.Silence, () => answer.IsCompleted);
        return await answer;
    }
}
