import { once } from 'node:events';
import type { AddressInfo, Server } from 'node:net';
import { ServerTCP } from 'modbus-serial';
import { type ModbusTestServer, RegisterMap } from './register-map.js';

/** What the library answers with exception 02 when a handler throws it. */
function illegalAddress(): Error {
  return Object.assign(new Error('no such address'), { modbusErrorCode: 2 });
}

function readMap<T>(map: ReadonlyMap<number, T>, address: number): T {
  const value = map.get(address);
  if (value === undefined) throw illegalAddress();
  return value;
}

function writeMap<T>(map: Map<number, T>, address: number, value: T): void {
  if (!map.has(address)) throw illegalAddress();
  map.set(address, value);
}

/** modbus-serial's own TCP server. */
export async function startModbusSerialServer(port = 0): Promise<ModbusTestServer> {
  const map = new RegisterMap();
  const server = new ServerTCP(
    {
      getCoil: (address: number) => readMap(map.coils, address),
      getDiscreteInput: (address: number) => readMap(map.discreteInputs, address),
      getHoldingRegister: (address: number) => readMap(map.holding, address),
      getInputRegister: (address: number) => readMap(map.input, address),
      setCoil: (address: number, value: boolean) => {
        writeMap(map.coils, address, value);
      },
      setRegister: (address: number, value: number) => {
        writeMap(map.holding, address, value);
      },
      setRegisterArray: (address: number, values: number[]) => {
        if (!values.every((_, index) => map.holding.has(address + index))) throw illegalAddress();
        values.forEach((value, index) => map.holding.set(address + index, value));
      },
    },
    { host: '127.0.0.1', port },
  );
  server.on('socketError', () => undefined);
  await once(server, 'initialized');
  const listener = (server as unknown as { _server: Server })._server;
  return {
    port: (listener.address() as AddressInfo).port,
    map,
    get connections() {
      return server.socks.size;
    },
    cut() {
      for (const socket of server.socks.keys()) socket.destroy();
    },
    stop: () =>
      new Promise((resolve) => {
        for (const socket of server.socks.keys()) socket.destroy();
        server.close(() => {
          resolve();
        });
      }),
  };
}
