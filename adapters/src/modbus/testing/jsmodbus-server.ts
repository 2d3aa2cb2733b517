import { once } from 'node:events';
import { type AddressInfo, createServer, type Socket } from 'node:net';
import {
  type ModbusAbstractRequest,
  ModbusTCPRequest,
  ModbusTCPResponse,
  ModbusTCPServer,
  requests,
  responses,
} from 'jsmodbus';
import { type ModbusTestServer, RegisterMap } from './register-map.js';

type Reply = (payload: Buffer) => void;
type ResponseBody = Parameters<typeof ModbusTCPResponse.fromRequest>[1];

/** Values of a run of addresses, or null where one of them does not exist. */
function valuesOf<T>(map: ReadonlyMap<number, T>, start: number, count: number): T[] | null {
  const values = Array.from({ length: count }, (_, index) => map.get(start + index));
  return values.includes(undefined) ? null : (values as T[]);
}

const illegalAddress = (functionCode: number): ResponseBody =>
  new responses.ExceptionResponseBody(functionCode as never, 2);

/** The answer to one request, by jsmodbus's own decoder and encoder over the map. */
function answer(map: RegisterMap, { body }: ModbusAbstractRequest): ResponseBody {
  if (requests.isReadHoldingRegistersRequestBody(body)) {
    const values = valuesOf(map.holding, body.start, body.count);
    return values
      ? new responses.ReadHoldingRegistersResponseBody(values.length * 2, values)
      : illegalAddress(body.fc);
  }
  if (requests.isReadInputRegistersRequestBody(body)) {
    const values = valuesOf(map.input, body.start, body.count);
    return values
      ? new responses.ReadInputRegistersResponseBody(values.length * 2, values)
      : illegalAddress(body.fc);
  }
  if (requests.isReadCoilsRequestBody(body)) {
    const values = valuesOf(map.coils, body.start, body.count);
    return values
      ? new responses.ReadCoilsResponseBody(values.map(Number), Math.ceil(body.count / 8))
      : illegalAddress(body.fc);
  }
  if (requests.isReadDiscreteInputsRequestBody(body)) {
    const values = valuesOf(map.discreteInputs, body.start, body.count);
    return values
      ? new responses.ReadDiscreteInputsResponseBody(values.map(Number), Math.ceil(body.count / 8))
      : illegalAddress(body.fc);
  }
  return answerWrite(map, body);
}

function answerWrite(map: RegisterMap, body: ModbusAbstractRequest['body']): ResponseBody {
  if (requests.isWriteSingleRegisterRequestBody(body)) {
    if (!map.holding.has(body.address)) return illegalAddress(body.fc);
    map.holding.set(body.address, body.value);
    return responses.WriteSingleRegisterResponseBody.fromRequest(body);
  }
  if (requests.isWriteMultipleRegistersRequestBody(body)) {
    if (!valuesOf(map.holding, body.address, body.quantity)) return illegalAddress(body.fc);
    for (let index = 0; index < body.quantity; index += 1) {
      map.holding.set(body.address + index, body.valuesAsBuffer.readUInt16BE(index * 2));
    }
    return responses.WriteMultipleRegistersResponseBody.fromRequest(body);
  }
  if (requests.isWriteSingleCoilRequestBody(body)) {
    if (!map.coils.has(body.address)) return illegalAddress(body.fc);
    map.coils.set(body.address, body.value === 0xff00);
    return responses.WriteSingleCoilResponseBody.fromRequest(body);
  }
  return new responses.ExceptionResponseBody(body.fc, 1);
}

/** A jsmodbus TCP server: an implementation that shares no code with modbus-serial. */
export async function startJsmodbusServer(port = 0): Promise<ModbusTestServer> {
  const map = new RegisterMap();
  const sockets = new Set<Socket>();
  const listener = createServer((socket) => {
    sockets.add(socket);
    socket.on('error', () => undefined).on('close', () => sockets.delete(socket));
  });
  const none = { coils: undefined, discrete: undefined, holding: undefined, input: undefined };
  const server = new ModbusTCPServer(listener, none);
  const handle = (request: ModbusAbstractRequest, reply: Reply): void => {
    if (!(request instanceof ModbusTCPRequest)) throw new TypeError('no Modbus TCP request');
    reply(ModbusTCPResponse.fromRequest(request, answer(map, request)).createPayload());
  };
  server.on('readCoils', handle).on('readDiscreteInputs', handle);
  server.on('readHoldingRegisters', handle).on('readInputRegisters', handle);
  server.on('writeSingleCoil', handle).on('writeSingleRegister', handle);
  server.on('writeMultipleRegisters', handle as never);
  listener.listen(port, '127.0.0.1');
  await once(listener, 'listening');
  const cut = (): void => {
    for (const socket of sockets) socket.destroy();
  };
  return {
    port: (listener.address() as AddressInfo).port,
    map,
    get connections() {
      return sockets.size;
    },
    cut,
    stop: () =>
      new Promise((resolve) => {
        listener.close(() => {
          resolve();
        });
        cut();
      }),
  };
}
