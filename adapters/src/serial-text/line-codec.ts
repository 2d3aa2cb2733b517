import { type ChecksumRule, sentenceIn, withChecksum, withoutChecksum } from './checksum.js';
import { plainText } from './escaped-text.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';

type CodecSettings = Pick<
  SerialTextConfiguration,
  'characters' | 'checksum' | 'checksumOn' | 'checksumSeparator' | 'checksumSkips' | 'requestTerminator'
>;

/** Between what a command or reply says and the characters on the wire: checksum and terminator. */
export class LineCodec {
  private readonly requestRule: ChecksumRule;
  private readonly replyRule: ChecksumRule;
  private readonly terminator: string;
  private readonly isAscii: boolean;

  constructor(settings: CodecSettings) {
    const separator = plainText(settings.checksumSeparator);
    const rule = { kind: settings.checksum, separator, skips: settings.checksumSkips };
    const none = { ...rule, kind: 'none' as const };
    this.requestRule = settings.checksumOn === 'replies' ? none : rule;
    this.replyRule = settings.checksumOn === 'requests' ? none : rule;
    this.terminator = plainText(settings.requestTerminator);
    this.isAscii = settings.characters === 'ascii';
  }

  /** A command with its checksum, and what is sent for it. */
  encode(command: string): { text: string; wire: string } {
    const text = withChecksum(command, this.requestRule);
    return { text, wire: text + this.terminator };
  }

  /** The line without noise before its beginning, where its form shows where it begins. */
  trim(line: string): string {
    return this.replyRule.kind === 'nmea-xor' ? sentenceIn(line) : line;
  }

  /** What a line says once it is checked, or why it says nothing. */
  decode(line: string): string | { fault: string } {
    const text = this.trim(line);
    // Control characters are ASCII too, and begin and end the lines of some devices; NUL is in none.
    if (this.isAscii && !isAsciiText(text)) return { fault: 'it has characters that are not ASCII' };
    return withoutChecksum(text, this.replyRule);
  }
}

function isAsciiText(text: string): boolean {
  for (let index = 0; index < text.length; index += 1) {
    const code = text.charCodeAt(index);
    if (code === 0 || code > 0x7f) return false;
  }
  return true;
}
