import type modbus from 'modbus-serial';
import { DomainError } from '@cresthold/shared';
import { exceptionText } from './exception-codes.js';
import { isBitTable, type ModbusTable, placeText } from './modbus-address.schema.js';

export type ModbusClient = InstanceType<typeof modbus.default>;

/** One request as the application protocol has it. */
export type ModbusRequest =
  | { kind: 'read'; unit: number; table: ModbusTable; address: number; count: number }
  | { kind: 'write-registers'; unit: number; address: number; words: number[] }
  | { kind: 'write-coil'; unit: number; address: number; isOn: boolean };

/** The device answered with an exception. */
export class ModbusRefusal extends DomainError {
  constructor(
    place: string,
    readonly exceptionCode: number,
  ) {
    super('adapter.refused', `${place}: the device answered ${exceptionText(exceptionCode)}.`);
  }
}

/** What any answer of the library can hold. */
interface Answer {
  buffer?: Buffer;
  address?: number;
  length?: number;
  value?: number;
  state?: boolean;
}

export type AnswerCallback = (error: unknown, answer: Answer | undefined) => void;

/** Where a request goes, in words. */
export function placeOf(request: ModbusRequest): string {
  switch (request.kind) {
    case 'read':
      return placeText(request.unit, request.table, request.address, request.count);
    case 'write-registers':
      return placeText(request.unit, 'holding-register', request.address, request.words.length);
    case 'write-coil':
      return placeText(request.unit, 'coil', request.address, 1);
  }
}

/** Puts the request on the wire: FC01 to FC04 by table, FC05, FC06 for one register, FC16 for more. */
export function sendRequest(client: ModbusClient, request: ModbusRequest, done: AnswerCallback): void {
  switch (request.kind) {
    case 'read':
      sendRead(client, request, done);
      return;
    case 'write-registers': {
      const { unit, address, words } = request;
      const [only] = words;
      if (words.length === 1 && only !== undefined) client.writeFC6(unit, address, only, done);
      else client.writeFC16(unit, address, words, done);
      return;
    }
    case 'write-coil':
      client.writeFC5(request.unit, request.address, request.isOn, done);
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

/** The payload of a good answer (empty for writes), or null where it does not fit the request. */
export function payloadOf(request: ModbusRequest, answer: Answer | undefined): Buffer | null {
  if (!answer) return null;
  switch (request.kind) {
    case 'read': {
      const bytes = isBitTable(request.table) ? Math.ceil(request.count / 8) : request.count * 2;
      return answer.buffer?.length === bytes ? answer.buffer : null;
    }
    case 'write-registers': {
      const isEcho =
        request.words.length === 1
          ? answer.value === request.words[0]
          : answer.length === request.words.length;
      return isEcho && answer.address === request.address ? nothing : null;
    }
    case 'write-coil':
      return answer.state === request.isOn && answer.address === request.address ? nothing : null;
  }
}
