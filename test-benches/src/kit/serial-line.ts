import { spawn } from 'node:child_process';
import { closeSync, constants, existsSync, lstatSync, openSync, unlinkSync } from 'node:fs';
import { once } from 'node:events';
import { setTimeout as wait } from 'node:timers/promises';
import { SerialPort } from 'serialport';

/** How a bench is reached on a serial line: by a port, or by a pseudo-terminal that it makes. */
export interface LineSettings {
  /** Path of a port; null where `pty` is given. */
  readonly serial: string | null;
  /** Path of the link that the pseudo-terminal gets; null where `serial` is given. */
  readonly pty: string | null;
  readonly baud: number;
  readonly parity: 'none' | 'even' | 'odd';
  readonly stopBits: 1 | 2;
}

export interface SerialLine {
  /** Where the other side finds the bench. */
  readonly path: string;
  onData(listener: (bytes: Buffer) => void): void;
  write(bytes: Buffer): void;
  close(): Promise<void>;
}

/** @throws Error that says what to do where the line cannot be opened */
export function openSerialLine(settings: LineSettings): Promise<SerialLine> {
  return settings.pty === null ? openPort(settings) : openPseudoTerminal(settings.pty);
}

async function openPort({ serial, baud, parity, stopBits }: LineSettings): Promise<SerialLine> {
  const path = serial ?? '';
  const port = new SerialPort({ path, baudRate: baud, parity, stopBits, dataBits: 8, autoOpen: false });
  await new Promise<void>((opened, failed) => port.open((error) => (error ? failed(error) : opened())));
  // A port that is unplugged ends the bench's use, not the bench.
  port.on('error', () => {});
  return {
    path,
    onData: (listener) => port.on('data', listener),
    write: (bytes) => port.write(bytes),
    close: () => new Promise((closed) => (port.isOpen ? port.close(() => closed()) : closed())),
  };
}

/** How long socat may take to make the link, ms. */
const linkWithinMs = 5000;

/** A bench that was killed leaves its link behind, which may by now lead to somebody else's terminal. */
function removeStaleLink(path: string): void {
  if (lstatSync(path, { throwIfNoEntry: false })?.isSymbolicLink()) unlinkSync(path);
}

/** socat holds one side of a pair of pseudo-terminals and hands its bytes on; the other side is at `path`. */
async function openPseudoTerminal(path: string): Promise<SerialLine> {
  removeStaleLink(path);
  const child = spawn('socat', [`pty,rawer,link=${path}`, 'stdio'], { stdio: ['pipe', 'pipe', 'ignore'] });
  const ended = new Promise<string>((told) => {
    child.once('error', () => told('socat could not be started: install the package "socat"'));
    child.once('exit', (code) => told(`socat ended with ${code}: is ${path} free, and its folder writable?`));
  });
  const until = Date.now() + linkWithinMs;
  let failure: string | null = null;
  void ended.then((why) => (failure = why));
  // What stands at `path` and is no link is left alone: socat says so.
  while (!existsSync(path) && failure === null && Date.now() < until) await wait(5);
  if (failure !== null || !existsSync(path)) {
    child.kill();
    throw new Error(`No pseudo-terminal at ${path}: ${failure ?? 'socat made none in time'}.`);
  }
  // Held open, since socat ends when the last peer goes away; nobody reads here.
  const held = openSync(path, constants.O_RDWR | constants.O_NOCTTY);
  child.stdin.on('error', () => {});
  return {
    path,
    onData: (listener) => child.stdout.on('data', listener),
    write: (bytes) => child.stdin.write(bytes),
    async close() {
      closeSync(held);
      if (child.exitCode !== null || child.signalCode !== null) return;
      const exit = once(child, 'exit');
      child.kill();
      await exit;
    },
  };
}
