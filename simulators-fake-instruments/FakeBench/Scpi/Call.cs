namespace FakeBench.Scpi;

/// <summary>One command as its handler sees it.</summary>
/// <param name="Suffixes">Numeric suffixes of the header, in order.</param>
/// <param name="Data">Its data.</param>
public sealed record Call(IReadOnlyList<int> Suffixes, IReadOnlyList<ProgramData> Data)
{
    /// <summary>The first numeric suffix.</summary>
    public int Suffix => Suffixes[0];

    /// <summary>A boolean: ON, OFF, or a number that rounds to 0 or not.</summary>
    /// <exception cref="ScpiException">−224 for another word, −104 for another type.</exception>
    public bool Boolean()
    {
        ProgramData data = Data[0];
        if (data.Kind != DataKind.Word)
        {
            return Math.Round(data.Number(""), MidpointRounding.AwayFromZero) != 0;
        }

        return data.Text.ToUpperInvariant() switch
        {
            "ON" => true,
            "OFF" => false,
            _ => throw new ScpiException(-224, data.Text),
        };
    }

    /// <summary>One of several words.</summary>
    /// <param name="at">Place of the parameter, from 0.</param>
    /// <param name="keywords">The words, short forms in upper case.</param>
    /// <returns>The keyword.</returns>
    /// <exception cref="ScpiException">−224 for another word, −104 for another type.</exception>
    public string Choice(int at, params ReadOnlySpan<string> keywords)
    {
        ProgramData data = Data[at];
        if (data.Kind != DataKind.Word)
        {
            throw new ScpiException(-104, data.Text);
        }

        foreach (string keyword in keywords)
        {
            if (Mnemonic.Is(data.Text, keyword))
            {
                return keyword;
            }
        }

        throw new ScpiException(-224, data.Text);
    }

    /// <summary>A word with a numeric suffix, e.g. <c>INTernal3</c>; none written means 1.</summary>
    /// <exception cref="ScpiException">−224 for another word or a suffix beyond the last, −104 for another
    /// type.</exception>
    public int Numbered(string keyword, int last)
    {
        ProgramData data = Data[0];
        if (data.Kind != DataKind.Word)
        {
            throw new ScpiException(-104, data.Text);
        }

        string word = data.Text.TrimEnd('0', '1', '2', '3', '4', '5', '6', '7', '8', '9');
        string digits = data.Text[word.Length..];
        int number = 1;
        bool known = Mnemonic.Is(word, keyword) && (digits.Length == 0 || int.TryParse(digits, out number));
        return known && number >= 1 && number <= last ? number : throw new ScpiException(-224, data.Text);
    }
}
