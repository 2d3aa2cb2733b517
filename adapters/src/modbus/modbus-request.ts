import { DomainError } from '@cresthold/shared';
import { exceptionText } from './exception-codes.js';
import { isBitTable, type ModbusTable, placeText } from './modbus-address.schema.js';

/** One request as the application protocol has it. */
export type ModbusRequest =
  /** Function codes 01 to 04, by table. */
  | { kind: 'read'; unit: number; table: ModbusTable; address: number; count: number }
  /** Function code 06 for one register, 16 for more. */
  | { kind: 'write-registers'; unit: number; address: number; words: number[] }
  /** Function code 23: writes, then reads the same registers back. */
  | { kind: 'write-and-read-back'; unit: number; address: number; words: number[] }
  /** Function code 22: register = (register AND andMask) OR (orMask AND NOT andMask). */
  | { kind: 'mask-write'; unit: number; address: number; andMask: number; orMask: number }
  /** Function code 05 for one coil, 15 for more. */
  | { kind: 'write-coils'; unit: number; address: number; states: boolean[] };

/** The device answered with an exception. */
export class ModbusRefusal extends DomainError {
  constructor(
    place: string,
    readonly exceptionCode: number,
    advice = '',
  ) {
    super('adapter.refused', `${place}: the device answered ${exceptionText(exceptionCode)}.${advice}`);
  }
}

/** Where a request goes, in words. */
export function placeOf(request: ModbusRequest): string {
  switch (request.kind) {
    case 'read':
      return placeText(request.unit, request.table, request.address, request.count);
    case 'write-registers':
    case 'write-and-read-back':
      return placeText(request.unit, 'holding-register', request.address, request.words.length);
    case 'mask-write':
      return placeText(request.unit, 'holding-register', request.address, 1);
    case 'write-coils':
      return placeText(request.unit, 'coil', request.address, request.states.length);
  }
}

/** Bytes of unit number and PDU of a request and of its good answer. */
export interface ExchangeBytes {
  request: number;
  answer: number;
}

/**
 * What a request and its answer take on the wire, without checksum or header.
 *
 * @source MODBUS Application Protocol V1.1b3, 6.1 to 6.6, 6.11, 6.12, 6.16, 6.17
 */
export function bytesOfExchange(request: ModbusRequest): ExchangeBytes {
  switch (request.kind) {
    case 'read':
      return { request: 6, answer: 3 + payloadBytes(request.table, request.count) };
    case 'write-registers': {
      const count = request.words.length;
      return { request: count === 1 ? 6 : 7 + 2 * count, answer: 6 };
    }
    case 'write-and-read-back': {
      const count = request.words.length;
      return { request: 11 + 2 * count, answer: 3 + 2 * count };
    }
    case 'mask-write':
      return { request: 8, answer: 8 };
    case 'write-coils': {
      const count = request.states.length;
      return { request: count === 1 ? 6 : 7 + Math.ceil(count / 8), answer: 6 };
    }
  }
}

/** Bytes of the values of a read answer. */
export function payloadBytes(table: ModbusTable, count: number): number {
  return isBitTable(table) ? Math.ceil(count / 8) : count * 2;
}
