import type { Server } from 'node:net';
import { ServerTCP, type IServiceVector } from 'modbus-serial';

const exceptionCodes = {
  function: 0x01,
  address: 0x02,
  value: 0x03,
  'device-failure': 0x04,
  'no-such-unit': 0x0b,
} as const;

/** An answer by exception; the server library sends `modbusErrorCode` on. */
export class ModbusException extends Error {
  readonly modbusErrorCode: number;

  constructor(kind: keyof typeof exceptionCodes) {
    super(`Modbus exception: ${kind}`);
    this.name = 'ModbusException';
    this.modbusErrorCode = exceptionCodes[kind];
  }
}

/** Holding registers of one or more units; both functions answer by a ModbusException where they refuse. */
export interface RegisterMap {
  /** @returns `count` words of one moment */
  read(unit: number, address: number, count: number): number[];
  write(unit: number, address: number, values: readonly number[]): void;
}

export interface ModbusFace {
  readonly port: number;
  close(): Promise<void>;
}

/**
 * Serves holding registers by Modbus TCP (function codes 03, 06, 16); all others get exception 01.
 *
 * @param port 0 for any free one
 */
export function openModbusFace(map: RegisterMap, host: string, port: number): Promise<ModbusFace> {
  // The library takes the number 0 for "not given" and opens 502; as text it reaches the socket as 0.
  const server = new ServerTCP(vectorOf(map), { host, port: String(port) as unknown as number });
  // A peer that vanishes is no business of the bench's.
  server.on('socketError', () => {});
  return new Promise((resolve, reject) => {
    const socket = (server as unknown as { _server: Server })._server;
    socket.once('error', reject);
    server.on('initialized', () => {
      const address = socket.address();
      resolve({
        port: typeof address === 'object' && address ? address.port : port,
        close: () => new Promise((closed) => server.close(() => closed())),
      });
    });
    server.on('error', reject);
  });
}

function vectorOf(map: RegisterMap): IServiceVector {
  const refuse = () => {
    throw new ModbusException('function');
  };
  return {
    getCoil: refuse,
    getDiscreteInput: refuse,
    getInputRegister: refuse,
    setCoil: refuse,
    getHoldingRegister: (address: number, unit: number) => map.read(unit, address, 1)[0] ?? 0,
    getMultipleHoldingRegisters: (address: number, count: number, unit: number) =>
      map.read(unit, address, count),
    setRegister: (address: number, value: number, unit: number) => map.write(unit, address, [value]),
    setRegisterArray: (address: number, values: number[], unit: number) => map.write(unit, address, values),
  };
}
