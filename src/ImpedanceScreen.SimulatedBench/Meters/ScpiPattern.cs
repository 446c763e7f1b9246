namespace ImpedanceScreen.SimulatedBench.Meters;

/// <summary>
/// A SCPI header as manuals write it, <c>[SENSe:]VOLTage[:DC]:RANGe</c>: each mnemonic is accepted in its short form
/// (the capitals) or its long form, in any case, and bracketed ones may be left out (SCPI-1999 volume 1 section 6).
/// </summary>
internal sealed class ScpiPattern
{
    private readonly List<(string Long, string Short, bool IsOptional)> nodes = [];
    private readonly bool isQuery;

    public ScpiPattern(string written)
    {
        isQuery = written.EndsWith('?');
        bool optional = false;
        string mnemonic = "";
        foreach (char letter in written.TrimEnd('?') + ":")
        {
            switch (letter)
            {
                case ':' or '[' or ']':
                    Add(mnemonic, optional);
                    mnemonic = "";
                    optional = letter == '[' || (optional && letter != ']');
                    break;
                default:
                    mnemonic += letter;
                    break;
            }
        }
    }

    /// <summary>Whether a header is a way of writing this one.</summary>
    public bool Matches(string header)
    {
        string mnemonics = isQuery && header.EndsWith('?') ? header[..^1] : header;
        return isQuery == header.EndsWith('?')
            && Matches(mnemonics.TrimStart(':').ToUpperInvariant().Split(':'), 0, 0);
    }

    private void Add(string mnemonic, bool optional)
    {
        if (mnemonic.Length > 0)
        {
            string shortForm = string.Concat(mnemonic.Where(letter => !char.IsAsciiLetterLower(letter)));
            nodes.Add((mnemonic.ToUpperInvariant(), shortForm, optional));
        }
    }

    private bool Matches(string[] parts, int part, int node)
    {
        if (node == nodes.Count)
        {
            return part == parts.Length;
        }

        bool fits = part < parts.Length && (parts[part] == nodes[node].Long || parts[part] == nodes[node].Short);
        return (fits && Matches(parts, part + 1, node + 1)) || (nodes[node].IsOptional && Matches(parts, part, node + 1));
    }
}
