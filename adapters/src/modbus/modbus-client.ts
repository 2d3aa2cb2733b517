import type { DomainError } from '@cresthold/shared';
import modbus from 'modbus-serial';
import { type ModbusRequest, payloadBytes } from './modbus-request.js';

const ModbusClientClass = modbus.default;

/** The library's client: it makes the frames of requests and takes answers apart. */
export type ModbusClient = InstanceType<typeof ModbusClientClass>;

/**
 * What the library needs of a port. Its own ports are not used: that for RTU knows neither function code 22 nor
 * 23 nor any silent interval, that for TCP believes every header; see decision 8.
 */
export interface ModbusPort {
  readonly isOpen: boolean;
  on(event: 'corrupt', listener: (text: string) => void): this;
  on(event: 'broken', listener: (error: DomainError) => void): this;
  open(done: (error: Error | null) => void): void;
  close(done: () => void): void;
  destroy(): void;
  /**
   * A request as an RTU frame: unit, PDU, checksum. Answered by the event `data` with an answer that fits it, as
   * a frame of the same form; by `corrupt` where what came is no answer to it; or by nothing. `broken`: the wire
   * is of no more use.
   */
  write(frame: Buffer): void;
}

/** The library's client over a port that is open already. */
export function clientOver(port: ModbusPort): ModbusClient {
  const client = new ModbusClientClass(port);
  client.open();
  return client;
}

/** What any answer of the library can hold. */
interface Answer {
  buffer?: Buffer;
  data?: unknown[];
}

export type AnswerCallback = (error: unknown, answer: object | undefined) => void;

/** Puts the request on the wire. */
export function sendRequest(client: ModbusClient, request: ModbusRequest, done: AnswerCallback): void {
  const { unit, address } = request;
  switch (request.kind) {
    case 'read':
      sendRead(client, request, done);
      return;
    case 'write-registers': {
      const [only = 0] = request.words;
      if (request.words.length === 1) client.writeFC6(unit, address, only, done);
      else client.writeFC16(unit, address, request.words, done);
      return;
    }
    case 'write-and-read-back': {
      const { words } = request;
      client.writeFC23(unit, address, words.length, address, words.length, words, done);
      return;
    }
    case 'mask-write':
      client.writeFC22(unit, address, request.andMask, request.orMask, done);
      return;
    case 'write-coils': {
      const [only = false] = request.states;
      if (request.states.length === 1) client.writeFC5(unit, address, only, done);
      else client.writeFC15(unit, address, request.states, done);
    }
  }
}

function sendRead(
  client: ModbusClient,
  { unit, table, address, count }: Extract<ModbusRequest, { kind: 'read' }>,
  done: AnswerCallback,
): void {
  switch (table) {
    case 'coil':
      client.writeFC1(unit, address, count, done);
      return;
    case 'discrete-input':
      client.writeFC2(unit, address, count, done);
      return;
    case 'holding-register':
      client.writeFC3(unit, address, count, done);
      return;
    case 'input-register':
      client.writeFC4(unit, address, count, done);
  }
}

const nothing = Buffer.alloc(0);

/** The payload of a good answer (empty for plain writes), or null where it does not fit the request. */
export function payloadOf(request: ModbusRequest, given: object | undefined): Buffer | null {
  if (!given) return null;
  const answer: Answer = given;
  if (request.kind === 'read') {
    return answer.buffer?.length === payloadBytes(request.table, request.count) ? answer.buffer : null;
  }
  if (request.kind === 'write-and-read-back') return wordsRead(answer, request.words.length);
  // Whether a write was echoed is judged by the port, which has every byte: see misfitOf.
  return nothing;
}

function wordsRead({ data }: Answer, count: number): Buffer | null {
  if (data?.length !== count) return null;
  const payload = Buffer.alloc(2 * count);
  data.forEach((word, index) => payload.writeUInt16BE(Number(word), 2 * index));
  return payload;
}
