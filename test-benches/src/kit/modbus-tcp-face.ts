import { createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import type { ModbusStation } from './modbus-station.js';

/** Transaction, protocol, length, unit; Modbus messaging on TCP/IP, V1.0b, section 3.1.3. */
const headerBytes = 7;
const mostPduBytes = 253;

export interface ModbusTcpFace {
  readonly port: number;
  /** Ends all connections, as a controller that lost power; new ones are welcome. */
  hangUp(): void;
  close(): Promise<void>;
}

/**
 * Serves a station by Modbus TCP, many peers at a time.
 *
 * @param port 0 for any free one
 */
export function openModbusTcpFace(
  station: ModbusStation,
  host: string,
  port: number,
): Promise<ModbusTcpFace> {
  const peers = new Set<Socket>();
  const server = createServer((socket) => {
    peers.add(socket);
    socket.setNoDelay(true);
    // A peer that vanishes is no business of the bench's.
    socket.on('error', () => {});
    socket.on('close', () => peers.delete(socket));
    serve(socket, station);
  });
  const hangUp = () => peers.forEach((peer) => peer.destroy());
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, host, () => {
      const { port: opened } = server.address() as AddressInfo;
      resolve({ port: opened, hangUp, close: () => closeAll(server, hangUp) });
    });
  });
}

function closeAll(server: Server, hangUp: () => void): Promise<void> {
  return new Promise((closed) => {
    server.close(() => closed());
    hangUp();
  });
}

function serve(socket: Socket, station: ModbusStation): void {
  let rest = Buffer.alloc(0);
  socket.on('data', (bytes) => {
    rest = Buffer.concat([rest, bytes]);
    while (rest.length >= headerBytes) {
      const pduBytes = rest.readUInt16BE(4) - 1;
      // Not Modbus, or out of step for good.
      if (rest.readUInt16BE(2) !== 0 || pduBytes < 1 || pduBytes > mostPduBytes) return socket.destroy();
      if (rest.length < headerBytes + pduBytes) return;
      const frame = rest.subarray(0, headerBytes + pduBytes);
      rest = rest.subarray(headerBytes + pduBytes);
      answerFrame(frame, socket, station);
    }
  });
}

function answerFrame(frame: Buffer, socket: Socket, station: ModbusStation): void {
  const reply = station.answer(frame.readUInt8(6), frame.subarray(headerBytes));
  if (reply.kind === 'silence') return;
  const header = Buffer.from(frame.subarray(0, headerBytes));
  header.writeUInt16BE(reply.pdu.length + 1, 4);
  const pdu = Buffer.from(reply.pdu);
  // TCP has no check sum to spoil: the answer is to something that was never asked.
  if (reply.isSpoiled) pdu[0] = (pdu[0] ?? 0) ^ 0x2a;
  socket.write(Buffer.concat([header, pdu]));
}
