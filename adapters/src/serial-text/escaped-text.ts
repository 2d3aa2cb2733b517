const named: Readonly<Record<string, string>> = { r: '\r', n: '\n', t: '\t', '\\': '\\' };

/**
 * The characters that a text with escapes stands for: `\r`, `\n`, `\t`, `\\` and `\xHH`. Null where a backslash is
 * followed by anything else.
 *
 * @example
 * unescapeText('\\x02R\\r'); // the character 2, "R" and a carriage return
 */
export function unescapeText(text: string): string | null {
  const parts = text.split('\\');
  let result = parts[0] ?? '';
  for (let index = 1; index < parts.length; index += 1) {
    const part = parts[index] ?? '';
    if (part === '' && index + 1 < parts.length) {
      // Two backslashes in a row: the next part is plain text.
      index += 1;
      result += `\\${parts[index] ?? ''}`;
      continue;
    }
    const escape = escapeAt(part);
    if (!escape) return null;
    result += escape.character + part.slice(escape.length);
  }
  return result;
}

function escapeAt(part: string): { character: string; length: number } | null {
  const hex = /^x([0-9a-fA-F]{2})/.exec(part);
  if (hex?.[1]) return { character: String.fromCharCode(parseInt(hex[1], 16)), length: 3 };
  const character = named[part.charAt(0)];
  return character === undefined ? null : { character, length: 1 };
}

/** What a text stands for; one that the schemas let through always stands for something. */
export function plainText(escaped: string): string {
  const text = unescapeText(escaped);
  if (text === null) throw new RangeError(`"${escaped}" has an unknown escape`);
  return text;
}

/** The text with everything that does not print written as an escape, at most `mostChars` of it. */
export function showText(text: string, mostChars = 200): string {
  const shown = [...text.slice(0, mostChars)].map(showCharacter).join('');
  return text.length > mostChars ? `${shown}… (${text.length} characters)` : shown;
}

function showCharacter(character: string): string {
  if (/^[\x20-\x7e]$/.test(character) && character !== '\\') return character;
  const name = Object.entries(named).find(([, meant]) => meant === character)?.[0];
  const code = character.charCodeAt(0).toString(16).toUpperCase().padStart(2, '0');
  return `\\${name ?? `x${code}`}`;
}
