using System.Globalization;
using System.Text;
using BenchRunner.Instruments.Roles;
using BenchRunner.Instruments.Sessions;

namespace BenchRunner.Instruments.Tests.Scripts;

/// <summary>Scripts of instruments that do what the generic dialects ask.</summary>
internal static class ScriptedRoles
{
    private static readonly SessionOptions Options = new()
    {
        ReplyWithin = TimeSpan.FromHours(1),
        ConnectWithin = TimeSpan.FromHours(1),
        WriteWithin = TimeSpan.FromSeconds(30),
        ReadAttempts = 1,
        ConnectAttempts = 1,
    };

    public static InstrumentConnection To(
        ScriptedInstrument instrument, string role, TimeProvider time, IInstrumentLog log, string? identity = null) =>
        new(instrument.Address, GenericDialects.Read(role, identity), Options, time, log);

    public static ScriptedInstrument Supply()
    {
        var supply = new ScriptedInstrument("MAKER,SUPPLY,1,1.0");
        supply.Keep("SOURce:VOLTage:LEVel:IMMediate:AMPLitude", "SOURce:VOLTage:LEVel:IMMediate:AMPLitude?", "0");
        supply.Keep("SOURce:CURRent:LEVel:IMMediate:AMPLitude", "SOURce:CURRent:LEVel:IMMediate:AMPLitude?", "0");
        supply.Keep("SOURce:VOLTage:PROTection:LEVel", "SOURce:VOLTage:PROTection:LEVel?", "1000");
        supply.Keep("OUTPut:STATe", "OUTPut:STATe?", "0");
        supply.On("SOURce:VOLTage:PROTection:TRIPped?", "0");
        supply.On("MEASure:VOLTage?", "+3.99700000E+02");
        supply.On("MEASure:CURRent?", "+1.20000000E-03");
        supply.On("STATus:QUEStionable:CONDition?", "2");
        return supply;
    }

    public static ScriptedInstrument Pulser()
    {
        var pulser = new ScriptedInstrument("MAKER,PULSER,1,1.0");
        var (armed, count) = (false, 41);
        foreach (var (set, initial) in new[]
        {
            ("SOURce:PULSe1:WIDTh", "0"), ("SOURce:PULSe2:DELay", "0"), ("SOURce:PULSe2:WIDTh", "0"),
            ("SOURce:VOLTage:LEVel:IMMediate:HIGH", "0"),
            ("SOURce:VOLTage:LEVel:IMMediate:LOW", "0"), ("OUTPut:STATe", "0"),
        })
        {
            pulser.Keep(set, set + "?", initial);
        }

        pulser.On("INITiate:IMMediate", _ => ScriptedInstrument.Done(() => armed = true));
        pulser.On("ABORt", _ => ScriptedInstrument.Done(() => armed = false));
        pulser.On("TRIGger:SEQuence:IMMediate", _ =>
            ScriptedInstrument.Done(() => (count, armed) = (count + (armed ? 1 : 0), false)));
        pulser.On("STATus:OPERation:CONDition?", v => v.Line(armed ? "32" : "0"));
        pulser.On("SOURce:PULSe:COUNt?", v => v.Line(count.ToString(CultureInfo.InvariantCulture)));
        return pulser;
    }

    public static ScriptedInstrument Interlock()
    {
        var interlock = new ScriptedInstrument("MAKER,INTERLOCK,1,1.0");
        interlock.On("SENSe:DATA?", "1,0,1,0");
        interlock.Keep("OUTPut:STATe", "OUTPut:STATe?", "1");
        interlock.Keep("SYSTem:WATChdog:TIMe", "SYSTem:WATChdog:TIMe?", "0");
        return interlock;
    }

    public static ScriptedInstrument Hotplate()
    {
        var plate = new ScriptedInstrument("MAKER,HOTPLATE,1,1.0");
        plate.Keep("SOURce:TEMPerature:SPOint", "SOURce:TEMPerature:SPOint?", "20");
        plate.Keep("OUTPut:STATe", "OUTPut:STATe?", "0");
        plate.On("MEASure:TEMPerature?", "+1.24700000E+02");
        return plate;
    }

    public static ScriptedInstrument Voltmeter(string reading = "+4.00012000E+02")
    {
        var voltmeter = new ScriptedInstrument("MAKER,VOLTMETER,1,1.0");
        voltmeter.On("MEASure:VOLTage:DC?", reading);
        return voltmeter;
    }

    /// <summary>A scope of 12 bits whose channel n shows codes that begin with n.</summary>
    public static ScriptedInstrument Scope(int points = 100)
    {
        var scope = new ScriptedInstrument("MAKER,SCOPE,1,1.0");
        var condition = "0";
        foreach (var (set, initial) in new[]
        {
            ("SENSe:SWEep:TINTerval", "1E-6"), ("SENSe:SWEep:POINts", "1000"), ("SENSe:SWEep:OFFSet:TIME", "0"),
            ("TRIGger:SEQuence:LEVel", "0"),
        })
        {
            scope.Keep(set, set + "?", initial);
        }

        scope.Keep("TRIGger:SEQuence:SOURce", "TRIGger:SEQuence:SOURce?", "INT1", a => a.Replace(
            "INTernal", "INT", StringComparison.Ordinal));
        scope.Keep("TRIGger:SEQuence:SLOPe", "TRIGger:SEQuence:SLOPe?", "POS");
        scope.Keep("FORMat:DATA", "FORMat:DATA?", "ASC,0", _ => "INT,16");
        scope.Keep("FORMat:BORDer", "FORMat:BORDer?", "NORM", _ => "SWAP");
        for (var c = 1; c <= 2; c++)
        {
            var channel = c;
            scope.Keep($"INPut{c}:ATTenuation", $"INPut{c}:ATTenuation?", "1");
            scope.On($"INPut{c}:DEGauss", _ => Task.CompletedTask);
            scope.Keep($"SENSe:VOLTage{c}:DC:RANGe:UPPer", $"SENSe:VOLTage{c}:DC:RANGe:UPPer?", "1");
            scope.Keep($"SENSe:VOLTage{c}:DC:RANGe:OFFSet", $"SENSe:VOLTage{c}:DC:RANGe:OFFSet?", "0");
            scope.On($"TRACe:PREamble? INTernal{c}", Preamble(points, channel));
            scope.On($"TRACe:DATA? INTernal{c}", v => v.Raw(Block(Codes(points, channel))));
        }

        scope.On("INITiate:IMMediate", _ => ScriptedInstrument.Done(() => condition = "32"));
        scope.On("ABORt", _ => ScriptedInstrument.Done(() => condition = "0"));
        scope.On("TRIGger:SEQuence:IMMediate", _ => ScriptedInstrument.Done(() => condition = "0"));
        scope.On("STATus:OPERation:CONDition?", v => v.Line(condition));
        scope.On("SENSe:SWEep:COUNt:ACTual?", "7");
        return scope;
    }

    /// <summary>points, xincrement, xorigin, xreference, yincrement, yorigin, yreference, lowest code, highest code,
    /// count.</summary>
    public static string Preamble(int points, int channel, int count = 7, double interval = 1e-9) =>
        string.Create(CultureInfo.InvariantCulture,
            $"{points},{interval:R},-1E-7,20,{channel * 800.0 / 4095:R},50,100,-2048,2047,{count}");

    public static short[] Codes(int points, int first) => [.. Enumerable.Range(first, points).Select(i => (short)i)];

    /// <summary>Codes as a block, low byte first.</summary>
    public static byte[] Block(short[] codes)
    {
        var length = (codes.Length * 2).ToString(CultureInfo.InvariantCulture);
        return
        [
            .. Encoding.ASCII.GetBytes($"#{length.Length}{length}"),
            .. codes.SelectMany(c => new[] { (byte)c, (byte)(c >> 8) }),
            (byte)'\n',
        ];
    }
}
