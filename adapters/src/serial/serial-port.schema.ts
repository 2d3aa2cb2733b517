import { z } from 'zod';

/** The fields of every adapter that opens a serial port; an adapter's own schema spreads them. */
export const serialPortFields = {
  path: z.string().trim().min(1, 'Give the path of the serial port, e.g. /dev/ttyUSB0.').max(255).meta({
    title: 'Port',
    description:
      'Path of the serial port, e.g. /dev/ttyUSB0. A path below /dev/serial/by-id stays the same wherever it is plugged in.',
  }),
  baudRate: z
    .int()
    .min(50)
    .max(4_000_000)
    .meta({ title: 'Baud rate', description: 'Bits per second, as set on the device.' }),
  dataBits: z
    .literal([5, 6, 7, 8])
    .meta({ title: 'Data bits', description: 'Bits of a character, as set on the device.' }),
  parity: z
    .enum(['none', 'even', 'odd'])
    .meta({ title: 'Parity', description: 'Check bit of a character, as set on the device.' }),
  stopBits: z
    .literal([1, 1.5, 2])
    .meta({ title: 'Stop bits', description: 'End of a character, as set on the device.' }),
  flowControl: z.enum(['none', 'rts-cts', 'xon-xoff']).meta({
    title: 'Flow control',
    description:
      'How either end makes the other wait: by the lines RTS and CTS, by the characters XON and XOFF, or not at all.',
  }),
};

/** How to open a serial port. */
export interface SerialPortSettings {
  path: string;
  /** Bits per second. */
  baudRate: number;
  dataBits: 5 | 6 | 7 | 8;
  parity: 'none' | 'even' | 'odd';
  stopBits: 1 | 1.5 | 2;
  /** `none` where left out. */
  flowControl?: 'none' | 'rts-cts' | 'xon-xoff';
}

/**
 * Time of one character on the wire, s: start bit, data bits, parity bit, stop bits.
 *
 * @example
 * characterTimeS({ baudRate: 9600, dataBits: 8, parity: 'even', stopBits: 1 }) // 11 / 9600
 */
export function characterTimeS(
  settings: Pick<SerialPortSettings, 'baudRate' | 'dataBits' | 'parity' | 'stopBits'>,
): number {
  const parityBits = settings.parity === 'none' ? 0 : 1;
  return (1 + settings.dataBits + parityBits + settings.stopBits) / settings.baudRate;
}
