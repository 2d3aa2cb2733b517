import type { ModbusStation } from './modbus-station.js';
import { RtuFramer, rtuFrame, type RtuFrame } from './rtu-framing.js';
import type { SerialLine } from './serial-line.js';

/** Reaches all units, none of which answers. */
const broadcastUnit = 0;

/**
 * Serves a station on a serial line. Silent for other units and for a bad CRC, as the line guide demands; a
 * broadcast is carried out and not answered.
 *
 * @param silenceMs what counts as the end of a frame
 */
export function serveModbusRtu(
  station: ModbusStation,
  line: SerialLine,
  silenceMs: number,
): { readonly stop: () => void } {
  const framer = new RtuFramer();
  let timer: NodeJS.Timeout | undefined;
  const answer = (frame: RtuFrame) => {
    const bytes = answerOf(frame, station);
    if (bytes) line.write(bytes);
  };
  line.onData((bytes) => {
    clearTimeout(timer);
    framer.take(bytes).forEach(answer);
    timer = setTimeout(() => {
      const frame = framer.silence();
      if (frame) answer(frame);
    }, silenceMs);
  });
  return { stop: () => clearTimeout(timer) };
}

function answerOf({ unit, pdu }: RtuFrame, station: ModbusStation): Buffer | null {
  if (unit === broadcastUnit) {
    station.answer(station.unit, pdu);
    return null;
  }
  if (!station.has(unit)) return null;
  const reply = station.answer(unit, pdu);
  if (reply.kind === 'silence') return null;
  const bytes = rtuFrame(unit, reply.pdu);
  if (reply.isSpoiled) bytes[bytes.length - 1] = (bytes[bytes.length - 1] ?? 0) ^ 0xff;
  return bytes;
}
