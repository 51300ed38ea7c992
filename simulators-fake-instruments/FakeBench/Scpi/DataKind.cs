namespace FakeBench.Scpi;

/// <summary>Type of a program data element (IEEE 488.2, 7.7).</summary>
public enum DataKind
{
    /// <summary>A word, e.g. <c>MINimum</c>.</summary>
    Word,

    /// <summary>A decimal number, perhaps with a unit.</summary>
    Real,

    /// <summary>A number as <c>#H24</c>, <c>#Q44</c>, <c>#B100100</c>.</summary>
    NonDecimal,

    /// <summary>A string in quotes.</summary>
    Text,

    /// <summary>A block of bytes.</summary>
    Block,

    /// <summary>An expression in parentheses.</summary>
    Expression,
}
