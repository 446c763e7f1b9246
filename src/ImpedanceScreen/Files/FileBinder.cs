namespace ImpedanceScreen.Files;

/// <summary>Binds files: reads the tree, checks <c>kind</c> and <c>format</c>, collects all mistakes.</summary>
public static class FileBinder
{
    /// <summary>The only format so far.</summary>
    public const int Format = 1;

    /// <summary>Reads and binds a file.</summary>
    /// <typeparam name="T">What it is bound to.</typeparam>
    /// <param name="file">The text.</param>
    /// <param name="kind">The word that <c>kind</c> must be, as <c>limits</c>.</param>
    /// <param name="bind">Reads the other keys; its value counts only without mistakes.</param>
    public static Checked<T> Bind<T>(FileText file, string kind, Func<MappingReader, T> bind)
        where T : class
    {
        ArgumentNullException.ThrowIfNull(file);
        ArgumentNullException.ThrowIfNull(bind);
        MistakeList mistakes = new(file.Name);
        if (YamlTree.Read(file, mistakes) is not { } root)
        {
            return Checked<T>.Bad(mistakes.InOrder());
        }

        MappingReader reader = new(root, root.Mark, "", mistakes);
        string written = reader.Text("kind");
        if (reader.Bound("kind") && written != kind)
        {
            // Every other key would be reported too: that would bury the one thing that is wrong.
            reader.Mistake(
                "kind", $"the file is of kind `{ScalarParser.Shorten(written)}`, not `{kind}`", "name the right file");
            return Checked<T>.Bad(mistakes.InOrder());
        }

        reader.Integer("format", Format, Format);
        T value = bind(reader);
        reader.Close();
        return mistakes.Count == 0 ? Checked<T>.Good(value) : Checked<T>.Bad(mistakes.InOrder());
    }
}
