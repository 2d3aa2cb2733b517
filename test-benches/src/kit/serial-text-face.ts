import type { SerialLine } from './serial-line.js';
import type { TextStation } from './text-station.js';

/** Longer than any command: what has no end by then is noise. */
const mostLineBytes = 4096;

/** Serves a station on a serial line: commands end with a line feed (a carriage return before it is fine), answers too. */
export function serveSerialText(station: TextStation, line: SerialLine): void {
  let rest = '';
  line.onData((bytes) => {
    const lines = (rest + bytes.toString('latin1')).split('\n');
    rest = lines.pop() ?? '';
    if (rest.length > mostLineBytes) rest = '';
    for (const text of lines) {
      const answer = station.answer(text.replace(/\r$/, ''));
      if (answer !== null) line.write(Buffer.from(`${answer}\n`, 'latin1'));
    }
  });
}
