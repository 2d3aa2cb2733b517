import { once } from 'node:events';
import { type AddressInfo, createServer, type Socket } from 'node:net';

export interface ScriptedServer {
  readonly port: number;
  /** Unit number and PDU of each request. */
  readonly requests: Buffer[];
  readonly connections: number;
  stop(): Promise<void>;
}

/** Puts unit number and PDU behind a Modbus TCP header with the transaction number of the request. */
export function framed(transaction: number, unitAndPdu: Uint8Array): Buffer {
  const header = Buffer.alloc(6);
  header.writeUInt16BE(transaction, 0);
  header.writeUInt16BE(unitAndPdu.length, 4);
  return Buffer.concat([header, unitAndPdu]);
}

/** A device whose every byte the test decides. Requests are taken as one segment each. */
export async function startScriptedServer(
  respond: (unitAndPdu: Buffer, socket: Socket, transaction: number) => void,
): Promise<ScriptedServer> {
  const sockets = new Set<Socket>();
  const requests: Buffer[] = [];
  const listener = createServer((socket) => {
    sockets.add(socket);
    socket.on('error', () => undefined).on('close', () => sockets.delete(socket));
    socket.on('data', (frame) => {
      requests.push(frame.subarray(6));
      respond(frame.subarray(6), socket, frame.readUInt16BE(0));
    });
  });
  listener.listen(0, '127.0.0.1');
  await once(listener, 'listening');
  return {
    port: (listener.address() as AddressInfo).port,
    requests,
    get connections() {
      return sockets.size;
    },
    stop: () =>
      new Promise((resolve) => {
        listener.close(() => {
          resolve();
        });
        for (const socket of sockets) socket.destroy();
      }),
  };
}
