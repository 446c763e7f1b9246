using System.Globalization;
using System.Text;

namespace ImpedanceScreen.Records.Canonical;

/// <summary>
/// Writes canonical JSON (RFC 8785) straight away: names must come in the order of their UTF-16 code units, so that
/// nothing is sorted
/// or held; a name out of order or given twice is refused. Not for several threads.
/// </summary>
public sealed class CanonicalWriter
{
    private const long LargestExactInteger = 1L << 53;

    private static readonly UTF8Encoding Strict = new(false, true);

    private byte[] buffer = new byte[16 * 1024];
    private int length;
    private readonly Stack<string?> outerNames = new();
    private string? lastName;
    private bool separate;

    /// <summary>What was written so far; valid until the next write.</summary>
    public ReadOnlySpan<byte> Written => buffer.AsSpan(0, length);

    /// <summary>Begins an object.</summary>
    public void StartObject() => Open((byte)'{');

    /// <summary>Ends an object.</summary>
    public void EndObject() => Close((byte)'}');

    /// <summary>Begins an array.</summary>
    public void StartArray() => Open((byte)'[');

    /// <summary>Ends an array.</summary>
    public void EndArray() => Close((byte)']');

    /// <summary>Writes the name of the next member.</summary>
    /// <exception cref="ArgumentException">It does not come after the member before it.</exception>
    public void Name(string name)
    {
        if (lastName is not null && string.CompareOrdinal(lastName, name) >= 0)
        {
            throw new ArgumentException($"Member '{name}' cannot follow '{lastName}'.", nameof(name));
        }

        lastName = name;
        String(name);
        Put((byte)':');
        separate = false;
    }

    /// <summary>Writes a text, or null.</summary>
    /// <exception cref="ArgumentException">A surrogate stands alone.</exception>
    public void String(string? text)
    {
        if (text is null)
        {
            Null();
            return;
        }

        Separate();
        Put((byte)'"');
        int plain = 0;
        for (int at = 0; at < text.Length; at++)
        {
            if (text[at] is < ' ' or '"' or '\\')
            {
                Literal(text.AsSpan(plain, at - plain));
                Escape(text[at]);
                plain = at + 1;
            }
        }

        Literal(text.AsSpan(plain));
        Put((byte)'"');
    }

    /// <summary>Writes a number.</summary>
    /// <exception cref="ArgumentException">NaN or infinity.</exception>
    public void Number(double value)
    {
        Separate();
        length += CanonicalNumber.Format(value, Free(CanonicalNumber.LongestLength));
    }

    /// <summary>Writes a whole number; beyond 2^53, where a JSON number is no longer exact, as text.</summary>
    public void Integer(long value)
    {
        if (value is > LargestExactInteger or < -LargestExactInteger)
        {
            String(value.ToString(CultureInfo.InvariantCulture));
            return;
        }

        Separate();
        value.TryFormat(Free(20), out int digits, default, CultureInfo.InvariantCulture);
        length += digits;
    }

    /// <summary>Writes true or false.</summary>
    public void Boolean(bool value)
    {
        Separate();
        Put(value ? "true"u8 : "false"u8);
    }

    /// <summary>Writes null.</summary>
    public void Null()
    {
        Separate();
        Put("null"u8);
    }

    private void Open(byte bracket)
    {
        Separate();
        Put(bracket);
        outerNames.Push(lastName);
        lastName = null;
        separate = false;
    }

    private void Close(byte bracket)
    {
        Put(bracket);
        lastName = outerNames.Pop();
        separate = true;
    }

    private void Separate()
    {
        if (separate)
        {
            Put((byte)',');
        }

        separate = true;
    }

    private void Put(byte character)
    {
        Free(1)[0] = character;
        length++;
    }

    private void Put(ReadOnlySpan<byte> characters)
    {
        characters.CopyTo(Free(characters.Length));
        length += characters.Length;
    }

    private Span<byte> Free(int count)
    {
        if (buffer.Length - length < count)
        {
            Array.Resize(ref buffer, Math.Max(2 * buffer.Length, length + count));
        }

        return buffer.AsSpan(length);
    }

    private void Literal(ReadOnlySpan<char> text)
    {
        if (!text.IsEmpty)
        {
            length += Strict.GetBytes(text, Free(Strict.GetMaxByteCount(text.Length)));
        }
    }

    private void Escape(char character)
    {
        ReadOnlySpan<byte> known = character switch
        {
            '"' => "\\\""u8,
            '\\' => "\\\\"u8,
            '\b' => "\\b"u8,
            '\t' => "\\t"u8,
            '\n' => "\\n"u8,
            '\f' => "\\f"u8,
            '\r' => "\\r"u8,
            _ => default,
        };
        if (known.IsEmpty)
        {
            Put("\\u00"u8);
            ((int)character).TryFormat(Free(2), out _, "x2", CultureInfo.InvariantCulture);
            length += 2;
        }

        Put(known);
    }
}
