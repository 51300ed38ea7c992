using System.Collections.Frozen;

namespace FakeBench.Scpi;

/// <summary>Error numbers, their texts, and the bit each class sets in the standard event register.</summary>
/// <remarks>Source: SCPI-1999 volume 2, 21.8, as far as tests/reference/scpi/errors.json holds it.</remarks>
public static class StandardErrors
{
    private static readonly FrozenDictionary<int, string> Texts = new Dictionary<int, string>
    {
        [0] = "No error",
        [-100] = "Command error",
        [-101] = "Invalid character",
        [-102] = "Syntax error",
        [-103] = "Invalid separator",
        [-104] = "Data type error",
        [-105] = "GET not allowed",
        [-108] = "Parameter not allowed",
        [-109] = "Missing parameter",
        [-110] = "Command header error",
        [-111] = "Header separator error",
        [-112] = "Program mnemonic too long",
        [-113] = "Undefined header",
        [-114] = "Header suffix out of range",
        [-115] = "Unexpected number of parameters",
        [-120] = "Numeric data error",
        [-121] = "Invalid character in number",
        [-123] = "Exponent too large",
        [-124] = "Too many digits",
        [-128] = "Numeric data not allowed",
        [-130] = "Suffix error",
        [-131] = "Invalid suffix",
        [-138] = "Suffix not allowed",
        [-140] = "Character data error",
        [-141] = "Invalid character data",
        [-148] = "Character data not allowed",
        [-150] = "String data error",
        [-151] = "Invalid string data",
        [-158] = "String data not allowed",
        [-160] = "Block data error",
        [-161] = "Invalid block data",
        [-168] = "Block data not allowed",
        [-200] = "Execution error",
        [-201] = "Invalid while in local",
        [-203] = "Command protected",
        [-210] = "Trigger error",
        [-211] = "Trigger ignored",
        [-213] = "Init ignored",
        [-214] = "Trigger deadlock",
        [-220] = "Parameter error",
        [-221] = "Settings conflict",
        [-222] = "Data out of range",
        [-223] = "Too much data",
        [-224] = "Illegal parameter value",
        [-225] = "Out of memory",
        [-230] = "Data corrupt or stale",
        [-231] = "Data questionable",
        [-240] = "Hardware error",
        [-241] = "Hardware missing",
        [-300] = "Device specific error",
        [-310] = "System error",
        [-311] = "Memory error",
        [-313] = "Calibration memory lost",
        [-315] = "Configuration memory lost",
        [-321] = "Out of memory",
        [-330] = "Self-test failed",
        [-340] = "Calibration failed",
        [-350] = "Queue overflow",
        [-360] = "Communication error",
        [-361] = "Parity error in program message",
        [-362] = "Framing error in program message",
        [-363] = "Input buffer overrun",
        [-365] = "Time out error",
        [-400] = "Query error",
        [-410] = "Query INTERRUPTED",
        [-420] = "Query UNTERMINATED",
        [-430] = "Query DEADLOCKED",
        [-440] = "Query UNTERMINATED after indefinite response",
        [-500] = "Power on",
        [-600] = "User request",
        [-700] = "Request control",
        [-800] = "Operation complete",
    }.ToFrozenDictionary();

    /// <summary>The standard's text of a number.</summary>
    public static string Text(int number) =>
        Texts.TryGetValue(number, out string? text) ? text : "Device specific error";

    /// <summary>Bit of the standard event register that an error sets; null for 0.</summary>
    /// <remarks>Source: SCPI-1999 volume 2, 21.8.2 and IEEE 488.2, 11.5.1.</remarks>
    public static int? EventBit(int number) => number switch
    {
        0 => null,
        > 0 => 3,
        > -100 => 3,
        > -200 => 5,
        > -300 => 4,
        > -400 => 3,
        > -500 => 2,
        > -600 => 7,
        > -700 => 6,
        > -800 => 1,
        > -900 => 0,
        _ => 3,
    };
}
