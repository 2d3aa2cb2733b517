import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Socket } from 'node:net';
import { describe, expect, it } from 'vitest';
import { connectionFault, destroySocket, openSocket } from './open-socket.js';

/**
 * A listener that accepts nothing: a process that sleeps, with its short queue of connections full,
 * so that further connections neither fail nor succeed.
 */
async function startDeafListener(): Promise<{ port: number; stop: () => void }> {
  const script = `
    const server = require('node:net').createServer();
    server.listen({ port: 0, host: '127.0.0.1', backlog: 1 }, () => {
      require('node:fs').writeSync(1, String(server.address().port) + '\\n');
      Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 20000);
    });`;
  const child = spawn(process.execPath, ['-e', script], { stdio: ['ignore', 'pipe', 'inherit'] });
  const [line] = (await once(child.stdout, 'data')) as [Buffer];
  const port = Number(line.toString());
  const fillers: Socket[] = Array.from({ length: 4 }, () => connect(port, '127.0.0.1'));
  for (const filler of fillers) filler.on('error', () => undefined);
  await Promise.all(fillers.slice(0, 2).map((filler) => once(filler, 'connect')));
  return {
    port,
    stop: () => {
      for (const filler of fillers) filler.destroy();
      child.kill('SIGKILL');
    },
  };
}

const never = new AbortController().signal;

describe('openSocket', () => {
  it('names host and port where nobody listens', async () => {
    const listener = createServer().listen(0, '127.0.0.1');
    await once(listener, 'listening');
    const { port } = listener.address() as AddressInfo;
    await new Promise((resolve) => listener.close(resolve));
    const opening = openSocket({ host: '127.0.0.1', port, timeoutMs: 2000 }, never);
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: `127.0.0.1:${port}: the host refuses the connection: check the port and that the device is on (ECONNREFUSED).`,
    });
  });

  it('names the host that is not known', async () => {
    const opening = openSocket({ host: 'no-such-device.invalid', port: 502, timeoutMs: 5000 }, never);
    // A machine without a name server answers EAI_AGAIN, one with a name server ENOTFOUND (RFC 6761, 6.4).
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.disconnected',
      message: expect.stringMatching(
        /^no-such-device\.invalid:502: .*host name.*\((ENOTFOUND|EAI_AGAIN)\)\.$/,
      ),
    });
  });

  it('gives up after the timeout, and at once when aborted', async () => {
    const deaf = await startDeafListener();
    try {
      const target = { host: '127.0.0.1', port: deaf.port };
      await expect(openSocket({ ...target, timeoutMs: 80 }, never)).rejects.toMatchObject({
        code: 'adapter.timeout',
        message: `127.0.0.1:${deaf.port}: no connection within 80 ms.`,
      });
      const abort = new AbortController();
      const opening = openSocket({ ...target, timeoutMs: 60_000 }, abort.signal);
      setTimeout(() => {
        abort.abort();
      }, 20);
      await expect(opening).rejects.toMatchObject({ code: 'adapter.cancelled' });
    } finally {
      deaf.stop();
    }
  });

  it('releases a socket that the peer has closed already', async () => {
    const listener = createServer((socket) => socket.end()).listen(0, '127.0.0.1');
    await once(listener, 'listening');
    const { port } = listener.address() as AddressInfo;
    const socket = await openSocket({ host: '127.0.0.1', port, timeoutMs: 2000 }, never);
    socket.resume();
    await once(socket, 'close');
    await destroySocket(socket);
    await destroySocket(socket);
    expect(socket.destroyed).toBe(true);
    await new Promise((resolve) => listener.close(resolve));
  });
});

it('connectionFault keeps an unknown error code in its text', () => {
  const fault = connectionFault({ host: 'rig', port: 5 }, Object.assign(new Error('x'), { code: 'EODD' }));
  expect(fault.message).toBe('rig:5: the connection failed (EODD).');
});
