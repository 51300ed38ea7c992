using BenchRunner.Instruments.Links;
using BenchRunner.Instruments.Replies;

namespace BenchRunner.Instruments.Sessions;

/// <summary>Sends what sets down: at once, before it is anybody's turn, and again over a new connection where the link
/// was lost.</summary>
/// <param name="turn">Whose turn it is on the instrument.</param>
/// <param name="wires">Its connections.</param>
/// <param name="repetition">How often it is tried.</param>
internal sealed class SettingDown(Turn turn, WireKeeper wires, Repetition repetition)
{
    /// <summary>Sends commands.</summary>
    /// <returns>What the error queue held afterwards.</returns>
    /// <exception cref="LinkException">The instrument was not reached, as often as is tried: its state is
    /// unknown.</exception>
    public async Task<IReadOnlyList<ErrorEntry>> Send(IReadOnlyList<string> commands, CancellationToken cancel)
    {
        var reached = SendNow(commands) ? wires.Current : null;
        return await repetition.Run(
            async (commands, token) =>
            {
                await turn.Take(token);
                try
                {
                    var wire = await wires.Ready(token);
                    if (!ReferenceEquals(wire, reached))
                    {
                        Send(wire, commands);
                        reached = wire;
                    }

                    return await wire.ReadErrors(token);
                }
                finally
                {
                    turn.Give();
                }
            },
            commands,
            cancel);
    }

    private static void Send(ScpiWire wire, IReadOnlyList<string> commands)
    {
        foreach (var command in commands)
        {
            wire.SendDown(command);
        }
    }

    private bool SendNow(IReadOnlyList<string> commands)
    {
        try
        {
            Send(wires.Current, commands);
            return true;
        }
        catch (LinkException)
        {
            // The wire has noted and reported why; the turn that follows opens a new one and sends again.
            return false;
        }
    }
}
