/**
 * Cuts a stream of bytes into lines, wherever the chunks were cut. A line that grows beyond the
 * most allowed length is noise: it is dropped whole and counted, and the next line is a fresh start.
 *
 * @example
 * const splitter = new LineSplitter('\r\n', 80);
 * splitter.push(Buffer.from('1.5\r')); // []
 * splitter.push(Buffer.from('\n2')); // ['1.5']
 */
export class LineSplitter {
  /** Lines dropped because they were too long. */
  dropped = 0;
  private rest = '';
  private isDropping = false;

  /**
   * @param delimiter what ends a line, at least one character
   * @param mostChars longest line without its delimiter
   */
  constructor(
    private readonly delimiter: string,
    private readonly mostChars: number,
  ) {
    if (delimiter === '') throw new RangeError('a delimiter has at least one character');
  }

  /** The lines that this chunk completes, without their delimiters. */
  push(chunk: Buffer): string[] {
    const parts = (this.rest + chunk.toString('latin1')).split(this.delimiter);
    this.rest = parts.pop() ?? '';
    const lines = parts.filter((line) => this.accept(line));
    this.trimNoise();
    return lines;
  }

  /** Forgets a line begun and not ended. */
  discard(): void {
    this.rest = '';
    this.isDropping = false;
  }

  private accept(line: string): boolean {
    const isNoise = this.isDropping || line.length > this.mostChars;
    if (isNoise && !this.isDropping) this.dropped += 1;
    this.isDropping = false;
    return !isNoise;
  }

  /** Keeps no more of a line that is noise already than may be the start of its delimiter. */
  private trimNoise(): void {
    if (this.rest.length <= this.mostChars + this.delimiter.length) return;
    if (!this.isDropping) this.dropped += 1;
    this.isDropping = true;
    this.rest = this.rest.slice(this.rest.length - this.delimiter.length);
  }
}
