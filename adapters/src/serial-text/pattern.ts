/**
 * Whether a text fits a pattern: `*` stands for any text, also none, `?` for any one character, everything else for
 * itself; `\*`, `\?` and `\\` stand for the characters. The work is bounded by the product of both lengths, whatever
 * the device sends: no pattern can hang.
 *
 * @example
 * fitsPattern('0,"No error"', '0,*'); // true
 */
export function fitsPattern(text: string, pattern: string): boolean {
  const tokens = tokensOf(pattern);
  let at = 0;
  let token = 0;
  /** Where the last `*` stands, and how much of the text it has taken; earlier ones need no second thought. */
  let star = -1;
  let taken = 0;
  while (at < text.length) {
    const wanted = tokens[token];
    if (wanted === anyText) {
      star = token;
      taken = at;
      token += 1;
    } else if (wanted !== undefined && (wanted === anyCharacter || wanted === text.charAt(at))) {
      at += 1;
      token += 1;
    } else if (star >= 0) {
      taken += 1;
      at = taken;
      token = star + 1;
    } else {
      return false;
    }
  }
  while (tokens[token] === anyText) token += 1;
  return token === tokens.length;
}

/** Whether a text fits one of several patterns. */
export function fitsAny(text: string, patterns: readonly string[]): boolean {
  return patterns.some((pattern) => fitsPattern(text, pattern));
}

const anyText = Symbol('any text');
const anyCharacter = Symbol('any one character');
type Token = string | typeof anyText | typeof anyCharacter;

const tokenLists = new Map<string, Token[]>();

/** Patterns come from the wiring, so there are few of them: each is taken apart once. */
function tokensOf(pattern: string): Token[] {
  const known = tokenLists.get(pattern);
  if (known) return known;
  const tokens: Token[] = [];
  for (let index = 0; index < pattern.length; index += 1) {
    const character = pattern.charAt(index);
    if (character === '\\' && index + 1 < pattern.length) {
      index += 1;
      tokens.push(pattern.charAt(index));
    } else if (character === '*') tokens.push(anyText);
    else tokens.push(character === '?' ? anyCharacter : character);
  }
  if (tokenLists.size >= 1000) tokenLists.clear();
  tokenLists.set(pattern, tokens);
  return tokens;
}
