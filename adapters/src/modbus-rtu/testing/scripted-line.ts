import { SerialPort } from 'serialport';
import { type PtyPair, startPtyPair } from '../../modbus/testing/pty-pair.js';

/** Frames that are kept: a test of leaks must not find those of the test itself. */
const mostKept = 50;

/** What the devices on the line send, in reply to one frame. */
export type Respond = (frame: Buffer, send: (bytes: Uint8Array) => void) => void;

export interface ScriptedLine {
  /** Path of the end that the adapter opens. */
  readonly path: string;
  /** The last frames that went out, with their checksum. */
  readonly requests: Buffer[];
  respond: Respond;
  /** Pulls the plug. */
  cut(): Promise<void>;
  stop(): Promise<void>;
}

/** Length of the request that begins here; 0 where it is not known yet (MODBUS Application Protocol V1.1b3, 6). */
function requestLength(bytes: Buffer): number {
  switch (bytes[1]) {
    case undefined:
      return 0;
    case 15:
    case 16:
      return bytes.length > 6 ? 9 + bytes.readUInt8(6) : 0;
    case 22:
      return 10;
    case 23:
      return bytes.length > 10 ? 13 + bytes.readUInt8(10) : 0;
    default:
      return 8;
  }
}

/** A serial line on a pseudo-terminal, with the real binding at both ends, whose every byte the test decides. */
export async function startScriptedLine(respond: Respond = () => undefined): Promise<ScriptedLine> {
  const pair = await startPtyPair();
  const far = await openFar(pair);
  const requests: Buffer[] = [];
  const line: ScriptedLine = {
    path: pair.near,
    requests,
    respond,
    cut: () => pair.stop(),
    async stop() {
      await new Promise<void>((resolve) => {
        if (far.isOpen)
          far.close(() => {
            resolve();
          });
        else resolve();
      });
      await pair.stop();
    },
  };
  const send = (bytes: Uint8Array): void => void far.write(Buffer.from(bytes));
  let rest = Buffer.alloc(0);
  far.on('data', (chunk: Buffer) => {
    rest = Buffer.concat([rest, chunk]);
    for (
      let length = requestLength(rest);
      length > 0 && rest.length >= length;
      length = requestLength(rest)
    ) {
      const frame = rest.subarray(0, length);
      rest = rest.subarray(length);
      requests.push(Buffer.from(frame));
      if (requests.length > mostKept) requests.shift();
      line.respond(frame, send);
    }
  });
  return line;
}

function openFar(pair: PtyPair): Promise<SerialPort> {
  const port = new SerialPort({ path: pair.far, baudRate: 115_200, autoOpen: false });
  port.on('error', () => undefined);
  return new Promise((resolve, reject) => {
    port.open((error) => {
      if (error) reject(error);
      else resolve(port);
    });
  });
}
