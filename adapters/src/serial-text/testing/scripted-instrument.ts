import { type ChildProcess, spawn } from 'node:child_process';
import { existsSync, lstatSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** What an instrument does with one command: what it sends, as text of latin1 or as bytes; null for nothing. */
export type Script = (command: string) => string | Buffer | null;

/** An instrument at the far end of a pseudo-terminal, scripted by a test. It shares no code with the adapter. */
export class ScriptedInstrument {
  /** Path of the port for the adapter. */
  readonly path: string;
  /** Every command that came, without its terminator. */
  readonly commands: string[] = [];
  /** What it does with a command. */
  script: Script;
  /** What it does with what it would send; the wire by default. */
  transmit: (bytes: Buffer) => void = (bytes) => {
    this.send(bytes);
  };
  private readonly folder = mkdtempSync(join(tmpdir(), 'cresthold-serial-'));
  private child: ChildProcess;
  private rest = '';

  constructor(
    script: Script,
    /** What ends a command. */
    private readonly terminator = '\n',
  ) {
    this.script = script;
    this.path = join(this.folder, 'tty');
    this.child = this.plugIn();
  }

  /** Sends bytes by itself. */
  send(bytes: string | Buffer): void {
    this.child.stdin?.write(typeof bytes === 'string' ? Buffer.from(bytes, 'latin1') : bytes);
  }

  /** Pulls the cable and plugs it in again under the same path. */
  cut(): void {
    this.unplug();
    this.child = this.plugIn();
  }

  unplug(): void {
    this.child.kill('SIGKILL');
    rmSync(this.path, { force: true });
  }

  stop(): Promise<void> {
    this.unplug();
    rmSync(this.folder, { recursive: true, force: true });
    return Promise.resolve();
  }

  private plugIn(): ChildProcess {
    const child = spawn('socat', ['-b', '65536', `PTY,link=${this.path},rawer`, 'STDIO'], {
      stdio: ['pipe', 'pipe', 'ignore'],
    });
    child.stdin.on('error', () => undefined);
    child.stdout.on('data', (chunk: Buffer) => {
      if (this.child === child) this.hear(chunk.toString('latin1'));
    });
    const pause = new Int32Array(new SharedArrayBuffer(4));
    for (let round = 0; round < 4000 && !this.isThere(); round += 1) Atomics.wait(pause, 0, 0, 1);
    return child;
  }

  private isThere(): boolean {
    return existsSync(this.path) && lstatSync(this.path).isSymbolicLink();
  }

  private hear(text: string): void {
    const parts = (this.rest + text).split(this.terminator);
    this.rest = parts.pop() ?? '';
    for (const command of parts) {
      this.commands.push(command);
      const reply = this.script(command);
      if (reply !== null) this.transmit(typeof reply === 'string' ? Buffer.from(reply, 'latin1') : reply);
    }
  }
}
