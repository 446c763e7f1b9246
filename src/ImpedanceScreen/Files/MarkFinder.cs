using System.Globalization;

namespace ImpedanceScreen.Files;

/// <summary>
/// Finds where a key stands in a file that was bound already. Models carry no places: the rare mistake that shows only
/// when two files meet reads the text once more.
/// </summary>
public static class MarkFinder
{
    /// <summary>
    /// The place of a key, or of the nearest thing above it that is there; line 1, column 1 where there is no tree.
    /// </summary>
    /// <param name="file">The text.</param>
    /// <param name="path">Path of the key, as <c>outputs[2].states[0].allowed.current_a</c>.</param>
    public static Mark Find(FileText file, string path)
    {
        ArgumentNullException.ThrowIfNull(path);
        YamlNode? node = YamlTree.Read(file, new MistakeList(""));
        Mark mark = node?.Mark ?? new(1, 1);
        foreach (string step in path.Replace("[", ".[", StringComparison.Ordinal).Split('.'))
        {
            (Mark At, YamlNode Node)? next = Step(node, step);
            if (next is null)
            {
                break;
            }

            (mark, node) = next.Value;
        }

        return mark;
    }

    private static (Mark At, YamlNode Node)? Step(YamlNode? node, string step)
    {
        if (node is YamlMapping mapping)
        {
            return mapping.Find(step) is { } entry ? (entry.KeyMark, entry.Value) : null;
        }

        if (node is YamlSequence sequence
            && int.TryParse(step.Trim('[', ']'), NumberStyles.None, CultureInfo.InvariantCulture, out int index)
            && index < sequence.Items.Count)
        {
            return (sequence.Items[index].Mark, sequence.Items[index]);
        }

        return null;
    }
}
