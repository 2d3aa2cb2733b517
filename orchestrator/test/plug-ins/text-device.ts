import { createServer, type AddressInfo, type Socket } from 'node:net';

/** The bath of the guide, written again from its description: lines of text over TCP. */
export interface TextDevice {
  port: number;
  values: Map<string, number>;
  close(): Promise<void>;
}

export async function startTextDevice(): Promise<TextDevice> {
  const values = new Map([
    ['temp', 21.5],
    ['setpoint', 20],
  ]);
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    socket.on('error', () => undefined);
    socket.on('data', (data) => {
      for (const line of data.toString().split('\n').slice(0, -1)) socket.write(`${answer(values, line)}\n`);
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  return {
    port: (server.address() as AddressInfo).port,
    values,
    close: () => {
      for (const socket of sockets) socket.destroy();
      return new Promise((resolve) => server.close(() => resolve()));
    },
  };
}

function answer(values: Map<string, number>, line: string): string {
  const [tag, verb, name = '', value] = line.split(' ');
  if (!values.has(name)) return `${tag} ERR no such value`;
  if (verb === 'GET') return `${tag} OK ${values.get(name)}`;
  values.set(name, Number(value));
  return `${tag} OK`;
}
