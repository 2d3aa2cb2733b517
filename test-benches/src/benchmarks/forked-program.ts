import { fork, type ChildProcess } from 'node:child_process';
import { existsSync } from 'node:fs';

/** Starts a built program as a process of its own, with a channel to it. */
export function forkProgram(path: string): ChildProcess {
  if (!existsSync(path)) throw new Error(`${path} is missing: run "npm run build:types" first.`);
  return fork(path, { stdio: ['ignore', 'inherit', 'inherit', 'ipc'] });
}

/** The next message of a program. Rejects when it ends instead, or when it takes too long. */
export function nextMessage(child: ChildProcess, timeoutMs: number): Promise<unknown> {
  return new Promise((resolve, reject) => {
    const settle = (act: () => void) => {
      clearTimeout(timer);
      child.off('message', onMessage);
      child.off('exit', onExit);
      act();
    };
    const onMessage = (message: unknown) => settle(() => resolve(message));
    const onExit = (code: number | null, signal: string | null) =>
      settle(() => reject(new Error(`${child.spawnfile} ended with ${signal ?? code} and no answer.`)));
    const timer = setTimeout(
      () => settle(() => reject(new Error(`No answer within ${timeoutMs / 1000} s.`))),
      timeoutMs,
    );
    child.on('message', onMessage);
    child.on('exit', onExit);
  });
}
