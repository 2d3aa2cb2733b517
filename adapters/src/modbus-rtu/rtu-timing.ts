import { characterTimeS, type SerialPortSettings } from '../serial/serial-port.schema.js';
import { bytesOfExchange, type ModbusRequest } from '../modbus/modbus-request.js';

export type CharacterSettings = Pick<SerialPortSettings, 'baudRate' | 'dataBits' | 'parity' | 'stopBits'>;

export interface SilentIntervals {
  /** Most silence within a frame. */
  t15Ms: number;
  /** Least silence between two frames. */
  t35Ms: number;
}

/** Above this speed the silent intervals are fixed. */
const fixedAboveBaud = 19_200;
const checksumBytes = 2;

/**
 * @source MODBUS over Serial Line V1.02, 2.5.1.1: 1.5 and 3.5 characters; fixed 750 µs and 1.750 ms above 19 200 baud
 * @example
 * silentIntervals({ baudRate: 115200, dataBits: 8, parity: 'even', stopBits: 1 }).t35Ms // 1.75
 */
export function silentIntervals(settings: CharacterSettings): SilentIntervals {
  if (settings.baudRate > fixedAboveBaud) return { t15Ms: 0.75, t35Ms: 1.75 };
  const characterMs = characterTimeS(settings) * 1000;
  return { t15Ms: 1.5 * characterMs, t35Ms: 3.5 * characterMs };
}

/** Time for which a request and its good answer occupy the line, with the silence after each of them. */
export function exchangeMs(request: ModbusRequest, settings: CharacterSettings): number {
  const bytes = bytesOfExchange(request);
  const characters = bytes.request + bytes.answer + 2 * checksumBytes;
  return characters * characterTimeS(settings) * 1000 + 2 * silentIntervals(settings).t35Ms;
}
