namespace BenchRunner.Acceptance.Files;

/// <summary>A node of a YAML file with the place where it starts.</summary>
/// <param name="Where">The place.</param>
internal abstract record YamlNode(Place Where);

/// <summary>A single value, always as the text that was written.</summary>
/// <param name="Text">The text, without quotes.</param>
/// <param name="Quoted">Whether it was quoted or a block scalar.</param>
/// <param name="Where">The place.</param>
internal sealed record YamlScalar(string Text, bool Quoted, Place Where) : YamlNode(Where);

/// <summary>A list.</summary>
/// <param name="Items">Its items as written.</param>
/// <param name="IsWhole">Whether it was read to its end; false where the file breaks off in it.</param>
/// <param name="Where">The place.</param>
internal sealed record YamlList(IReadOnlyList<YamlNode> Items, bool IsWhole, Place Where) : YamlNode(Where);

/// <summary>A block of keys; no key twice.</summary>
/// <param name="Entries">Its entries as written.</param>
/// <param name="IsWhole">Whether it was read to its end; false where the file breaks off in it.</param>
/// <param name="Where">The place.</param>
internal sealed record YamlMap(IReadOnlyList<YamlEntry> Entries, bool IsWhole, Place Where) : YamlNode(Where)
{
    /// <summary>The value of a key, or null.</summary>
    public YamlNode? Find(string key)
    {
        foreach (YamlEntry entry in Entries)
        {
            if (entry.Key == key)
            {
                return entry.Value;
            }
        }

        return null;
    }
}

/// <summary>A node whose mistake has been reported already: whoever reads on says nothing more about it.</summary>
/// <param name="Where">The place.</param>
internal sealed record YamlBroken(Place Where) : YamlNode(Where);

/// <summary>A key and its value.</summary>
/// <param name="Key">The key.</param>
/// <param name="At">Place of the key.</param>
/// <param name="Value">The value.</param>
internal sealed record YamlEntry(string Key, Place At, YamlNode Value);
