using System.Text;
using YamlDotNet.Core;
using YamlDotNet.Core.Events;

namespace ImpedanceScreen.Files;

/// <summary>
/// Reads a file's text into a tree with places. Of YAML only the plain part is allowed: one document of mappings, lists
/// and values. Anchors, aliases, tags and merge keys are refused, because a value that stands elsewhere cannot be
/// reviewed where it is used.
/// </summary>
public sealed class YamlTree
{
    /// <summary>Largest file, bytes of UTF-8.</summary>
    public const int LargestBytes = 1024 * 1024;

    /// <summary>Deepest nesting of lists and mappings.</summary>
    public const int DeepestNesting = 16;

    private readonly Parser parser;
    private readonly MistakeList mistakes;
    private ParsingEvent current = new StreamStart();

    private YamlTree(string text, MistakeList mistakes)
    {
        parser = new Parser(new StringReader(text));
        this.mistakes = mistakes;
    }

    /// <summary>Reads the tree; null where the text gives none, then there is at least one mistake.</summary>
    /// <param name="file">The text.</param>
    /// <param name="mistakes">Takes every mistake found; a syntax error is the only one then.</param>
    public static YamlMapping? Read(FileText file, MistakeList mistakes)
    {
        ArgumentNullException.ThrowIfNull(file);
        ArgumentNullException.ThrowIfNull(mistakes);
        if (Encoding.UTF8.GetByteCount(file.Text) > LargestBytes)
        {
            mistakes.Add(new(1, 1), "", "the file is larger than 1 MiB", "check that it is the file you mean");
            return null;
        }

        YamlTree tree = new(file.Text, mistakes);
        try
        {
            return tree.ReadStream();
        }
        catch (YamlException error)
        {
            // A tab is found where the line above should have gone on; everything else where it begins.
            bool tab = error.Message.Contains("tab character", StringComparison.Ordinal);
            return tree.Unreadable(At(tab ? error.End : error.Start), error.Message.TrimEnd('.', ' '));
        }
        catch (Exception error) when (error is InvalidOperationException or ArgumentException)
        {
            // The parser's own slips: a flow list that is never closed, an escape beyond Unicode.
            return tree.Unreadable(At(tree.current.End), "a bracket that is not closed or an impossible escape follows");
        }
    }

    private YamlMapping? Unreadable(Mark mark, string why)
    {
        mistakes.Clear();
        mistakes.Add(mark, "", "not readable as YAML: " + why, "mend what begins or ends here");
        return null;
    }

    private YamlMapping? ReadStream()
    {
        Step();
        if (Step() is StreamEnd)
        {
            mistakes.Add(new(1, 1), "", "the file is empty", "give it at least `kind` and `format`");
            return null;
        }

        Step();
        YamlNode root = ReadNode(depth: 0);
        Step();
        if (Step() is DocumentStart second)
        {
            mistakes.Add(At(second.Start), "", "a second document begins here", "keep one document in a file");
        }

        if (root is YamlMapping mapping)
        {
            return mapping;
        }

        mistakes.Add(root.Mark, "", "the file is not a list of `key: value` lines", "begin with `kind:` and `format:`");
        return null;
    }

    // The current event is the first of a node when this is called, and its last when it returns.
    private YamlNode ReadNode(int depth)
    {
        ParsingEvent first = current;
        Mark mark = At(first.Start);
        if (depth > DeepestNesting)
        {
            throw new SyntaxErrorException(first.Start, first.End, $"nested deeper than {DeepestNesting} levels");
        }

        RefuseDecoration(first, mark);
        switch (first)
        {
            case Scalar scalar:
                return new YamlScalar(scalar.Value, scalar.Style == ScalarStyle.Plain, mark);
            case SequenceStart:
                return new YamlSequence(ReadItems(depth), mark);
            case MappingStart:
                return new YamlMapping(ReadEntries(depth), mark);
            default:
                mistakes.Add(mark, "", "an alias (`*`) is not allowed", "write the value out");
                return new YamlRefused(mark);
        }
    }

    private List<YamlNode> ReadItems(int depth)
    {
        List<YamlNode> items = [];
        while (Step() is not SequenceEnd)
        {
            items.Add(ReadNode(depth + 1));
        }

        return items;
    }

    private List<YamlEntry> ReadEntries(int depth)
    {
        List<YamlEntry> entries = [];
        Dictionary<string, Mark> seen = new(StringComparer.Ordinal);
        while (Step() is not MappingEnd)
        {
            YamlNode key = ReadNode(depth + 1);
            Step();
            YamlNode value = ReadNode(depth + 1);
            if (KeyOf(key) is not { } name)
            {
                continue;
            }

            if (seen.TryGetValue(name, out Mark earlier))
            {
                mistakes.Add(
                    key.Mark, name, $"the key stands twice, first in line {earlier.Line}", "remove one of them");
                continue;
            }

            seen.Add(name, key.Mark);
            entries.Add(new(name, key.Mark, value));
        }

        return entries;
    }

    private string? KeyOf(YamlNode key)
    {
        switch (key)
        {
            case YamlScalar { Text: "<<", IsPlain: true }:
                mistakes.Add(key.Mark, "<<", "a merge key is not allowed", "write the keys out");
                return null;
            case YamlScalar scalar:
                return scalar.Text;
            case YamlRefused:
                return null;
            default:
                mistakes.Add(key.Mark, "", "a list or mapping cannot be a key", "write a key as plain text");
                return null;
        }
    }

    private void RefuseDecoration(ParsingEvent first, Mark mark)
    {
        if (first is not NodeEvent node)
        {
            return;
        }

        if (!node.Anchor.IsEmpty)
        {
            mistakes.Add(mark, "", $"an anchor (`&{node.Anchor}`) is not allowed", "write each value where it is used");
        }

        if (!node.Tag.IsEmpty)
        {
            mistakes.Add(mark, "", $"a tag (`{node.Tag}`) is not allowed", "remove it; each key has its own type");
        }
    }

    // After some slips the parser gives no event in the middle of a document, with no word why.
    private ParsingEvent Step() =>
        current = parser.MoveNext() && parser.Current is { } next
            ? next
            : throw new SyntaxErrorException(current.End, current.End, "the document ends in the middle");

    private static Mark At(YamlDotNet.Core.Mark mark) =>
        new((int)Math.Max(1, mark.Line), (int)Math.Max(1, mark.Column));
}
