namespace FakeBench.Scpi;

/// <summary>Obeys program messages: the commands of one instrument beside those that every instrument has.</summary>
/// <remarks>
/// Source: IEEE 488.2, 10 (common commands); SCPI-1999 volume 2, 20 and 21 (STATus, SYSTem). Every command is
/// sequential: nothing is pending when the next one starts, so *OPC and *WAI have nothing to wait for; what lasts
/// longer (slewing, an acquisition) shows in the operation register. After a faulty unit the rest of the message is
/// obeyed.
/// </remarks>
public sealed class Interpreter
{
    /// <summary>Makes an interpreter with the common commands.</summary>
    /// <param name="identity">Answer to <c>*IDN?</c>.</param>
    /// <param name="reset">What <c>*RST</c> does.</param>
    public Interpreter(Func<string> identity, Action reset)
    {
        AddCommon(identity, reset);
        AddRegister("STATus:OPERation", Status.Operation);
        AddRegister("STATus:QUEStionable", Status.Questionable);
        Commands.Event("STATus:PRESet", _ =>
        {
            Status.Operation.SetEnable(0);
            Status.Questionable.SetEnable(0);
        });
        Commands.Ask("SYSTem:ERRor[:NEXT]?", _ => Status.Errors.Next());
        Commands.Ask("SYSTem:ERRor:COUNt?", _ => Numbers.Nr1(Status.Errors.Count));
        Commands.Ask("SYSTem:VERSion?", _ => "1999.0");
    }

    /// <summary>The commands.</summary>
    public CommandTree Commands { get; } = new();

    /// <summary>The status registers and error queue.</summary>
    public StatusSystem Status { get; } = new();

    /// <summary>Obeys one message.</summary>
    /// <param name="message">The message without terminator; each character is one byte.</param>
    /// <returns>What it says.</returns>
    public Reply Obey(string message)
    {
        var reply = new Reply();
        var units = new ProgramMessage(message);
        try
        {
            while (units.Next() is { } unit)
            {
                Obey(unit, reply);
            }
        }
        catch (ScpiException error)
        {
            Status.Report(error.Number, error.Detail);
        }

        return reply;
    }

    private void Obey(ProgramUnit unit, Reply reply)
    {
        try
        {
            (Command command, Call call) = Commands.Find(unit);
            command.Run(call, reply);
        }
        catch (ScpiException error)
        {
            Status.Report(error.Number, error.Detail);
        }
    }

    private void AddCommon(Func<string> identity, Action reset)
    {
        Commands.Ask("*IDN?", _ => identity());
        Commands.Event("*RST", _ => reset());
        Commands.Event("*CLS", _ => Status.Clear());
        Commands.WholeNumber(
            "*ESE", NumericRange.Mask(255), mask => Status.EventEnable = mask, () => Status.EventEnable);
        Commands.Ask("*ESR?", _ => Numbers.Nr1(Status.ReadEvents()));
        Commands.WholeNumber("*SRE", NumericRange.Mask(255), Status.SetServiceEnable, () => Status.ServiceEnable);
        Commands.Add("*STB?", 0, 0, (_, reply) => reply.Say(Numbers.Nr1(Status.StatusByte(reply.HasContent))));
        Commands.Event("*OPC", _ => Status.OperationComplete());
        Commands.Ask("*OPC?", _ => "1");
        Commands.Event("*WAI", _ => { });
        Commands.Ask("*TST?", _ => "0");
    }

    private void AddRegister(string name, StatusRegister register)
    {
        Commands.Ask(name + "[:EVENt]?", _ => Numbers.Nr1(register.ReadEvent()));
        Commands.Ask(name + ":CONDition?", _ => Numbers.Nr1(register.Condition));
        Commands.WholeNumber(name + ":ENABle", NumericRange.Mask(65535), register.SetEnable, () => register.Enable);
    }
}
