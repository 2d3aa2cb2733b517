import { once } from 'node:events';
import { type AddressInfo, connect, createServer, type Socket } from 'node:net';

/** What a relay does with the bytes that the device sends; requests always go through. */
export type RelayMode =
  | { kind: 'pass' }
  /** Drops answers. */
  | { kind: 'drop' }
  /** Holds answers back until the mode changes: they come late, but they come. */
  | { kind: 'hold' }
  | { kind: 'change'; change: (answer: Buffer) => Buffer }
  /** One byte per segment. */
  | { kind: 'dribble' };

export interface Relay {
  readonly port: number;
  setMode(mode: RelayMode): void;
  /** Requests that went through, one entry per request. */
  readonly requests: Buffer[];
  cut(): void;
  stop(): Promise<void>;
}

/** A TCP relay on a port of its own in front of a device, for tests of what goes wrong on the way. */
export async function startRelay(devicePort: number): Promise<Relay> {
  let mode: RelayMode = { kind: 'pass' };
  const held: (() => void)[] = [];
  const sockets = new Set<Socket>();
  const requests: Buffer[] = [];
  const keep = (socket: Socket): void => {
    socket.setNoDelay(true);
    sockets.add(socket);
    socket.on('error', () => undefined).on('close', () => sockets.delete(socket));
  };
  const listener = createServer((client) => {
    const device = connect(devicePort, '127.0.0.1');
    keep(client);
    keep(device);
    client.on('data', (request) => {
      requests.push(request);
      device.write(request);
    });
    device.on('data', (answer) => {
      if (mode.kind === 'pass') client.write(answer);
      else if (mode.kind === 'hold') held.push(() => client.write(answer));
      else if (mode.kind === 'change') client.write(mode.change(answer));
      else if (mode.kind === 'dribble') void dribble(client, answer);
    });
    client.on('close', () => device.destroy());
    device.on('close', () => client.destroy());
  });
  listener.listen(0, '127.0.0.1');
  await once(listener, 'listening');
  const cut = (): void => {
    for (const socket of sockets) socket.destroy();
  };
  return {
    port: (listener.address() as AddressInfo).port,
    requests,
    cut,
    setMode(next) {
      mode = next;
      for (const release of held.splice(0)) release();
    },
    stop: () =>
      new Promise((resolve) => {
        listener.close(() => {
          resolve();
        });
        cut();
      }),
  };
}

async function dribble(client: Socket, answer: Buffer): Promise<void> {
  for (const byte of answer) {
    client.write(Buffer.of(byte));
    await new Promise((resolve) => setImmediate(resolve));
  }
}
