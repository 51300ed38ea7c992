using FakeBench.Instruments;

namespace FakeBench.Hosting.Hislip;

/// <summary>Sends the replies of one session, cut to what the client takes; a late one holds nothing else up and can be
/// taken back.</summary>
/// <param name="outlet">The way out of the synchronous channel.</param>
/// <param name="time">The clock of late replies.</param>
public sealed class Replier(Outlet outlet, TimeProvider time) : IDisposable
{
    private readonly Lock _gate = new();
    private CancellationTokenSource _patience = new();
    private Task _sending = Task.CompletedTask;

    /// <summary>The longest message that the client takes, header included, bytes.</summary>
    public ulong Longest { get; set; } = 1024;

    /// <summary>Begins to send a reply, behind those before it.</summary>
    /// <param name="answer">The reply, and what goes wrong on its way.</param>
    /// <param name="id">Identifier of the message that it answers.</param>
    /// <param name="stop">Ends it.</param>
    public void Begin(Answer answer, uint id, CancellationToken stop)
    {
        lock (_gate)
        {
            _sending = Send(_sending, answer, id, _patience.Token, stop);
        }
    }

    /// <summary>Takes back what is still late or not begun. Waits for nothing: the client may not read now.</summary>
    public void TakeBack()
    {
        lock (_gate)
        {
            _patience.Cancel();
        }
    }

    /// <summary>Waits until what was begun is out or taken back; then replies may go out again.</summary>
    public async Task Settle()
    {
        TakeBack();
        await _sending;
        lock (_gate)
        {
            _patience.Dispose();
            _patience = new CancellationTokenSource();
        }
    }

    /// <inheritdoc/>
    public void Dispose()
    {
        lock (_gate)
        {
            _patience.Dispose();
        }
    }

    private async Task Send(
        Task before, Answer answer, uint id, CancellationToken patience, CancellationToken stop)
    {
        await before;
        if (patience.IsCancellationRequested)
        {
            return;
        }

        if (answer.Late > TimeSpan.Zero)
        {
            try
            {
                using var either = CancellationTokenSource.CreateLinkedTokenSource(patience, stop);
                await Task.Delay(answer.Late, time, either.Token);
            }
            catch (OperationCanceledException) when (patience.IsCancellationRequested)
            {
                return;
            }
        }

        if (answer.CutShort)
        {
            await outlet.Send(
                new Frame(Kind.Data, 0, id, answer.Bytes[..(answer.Bytes.Length / 2)]), stop);
            outlet.Close(abruptly: true);
            return;
        }

        int most = (int)Math.Min(Longest - Frame.Head, Frame.LongestPayload);
        int sent = 0;
        while (answer.Bytes.Length - sent > most)
        {
            if (patience.IsCancellationRequested)
            {
                return;
            }

            await Send(new Frame(Kind.Data, 0, id, answer.Bytes[sent..(sent += most)]), answer, stop);
        }

        await Send(new Frame(Kind.DataEnd, 0, id, answer.Bytes[sent..]), answer, stop);
    }

    /// <summary>Sends a frame at once, or as the answer drips: the header counts to the first piece, unless that is a
    /// single byte.</summary>
    private Task Send(Frame frame, Answer answer, CancellationToken stop) => answer.Piece == 0
        ? outlet.Send(frame, stop)
        : outlet.Send(
            frame, answer.Piece == 1 ? 1 : Frame.Head + answer.Piece, end => Task.Delay(answer.Gap, time, end), stop);
}
