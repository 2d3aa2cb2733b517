import { DomainError } from '@cresthold/shared';
import type { ProbeOutcome } from '../contract.js';
import { decodeValue } from './codec.js';
import { exceptionText } from './exception-codes.js';
import { isBitTable, isTrace, type ModbusAddress, registersText, widthOf } from './modbus-address.schema.js';
import type { ModbusAsker } from './modbus-asker.js';
import { ModbusRefusal } from './modbus-request.js';
import { TraceRead } from './trace-read.js';
import { hexWords } from './write-runner.js';

/** Words of a trace that are shown. */
const mostWordsShown = 8;

/** Tries one address by itself. @param deadlineMs when it must be over */
export async function probeAddress(
  asker: ModbusAsker,
  address: ModbusAddress,
  deadlineMs: number,
): Promise<ProbeOutcome> {
  const { unit, table } = address;
  const trace = isTrace(address) ? new TraceRead(0, address) : null;
  const single = { kind: 'read', unit, table, address: address.address, count: widthOf(address) } as const;
  const payloads: Buffer[] = [];
  for (const request of trace?.chunks ?? [single]) {
    const answer = await asker.ask(request, deadlineMs);
    if (!Buffer.isBuffer(answer)) return failed(answer ?? tooSlow());
    trace?.accept(answer);
    payloads.push(answer);
  }
  const payload = Buffer.concat(payloads);
  return {
    raw: rawText(address, payload),
    value: trace ? NaN : decodeValue(payload, 0, address),
    trace: trace?.values ?? null,
    fault: null,
  };
}

function failed(fault: DomainError): ProbeOutcome {
  const raw = fault instanceof ModbusRefusal ? exceptionText(fault.exceptionCode) : 'no valid answer';
  return { raw: fault.code === 'adapter.timeout' ? 'no answer' : raw, value: NaN, trace: null, fault };
}

function tooSlow(): DomainError {
  return new DomainError('adapter.timeout', 'The requests for this address take longer than one call may.');
}

/** E.g. `holding-register 40: 0x01F4`, `coil 3: 1`, `holding-register 0 to 511: 0x0000 0x0001 … (512 words)`. */
function rawText({ table, address, type, points }: ModbusAddress, payload: Buffer): string {
  const place = registersText(table, address, widthOf({ type, points }));
  if (isBitTable(table)) return `${place}: ${(payload[0] ?? 0) & 1}`;
  const count = payload.length / 2;
  const shown = Math.min(count, mostWordsShown);
  const words = Array.from({ length: shown }, (_, index) => payload.readUInt16BE(2 * index));
  return `${place}: ${hexWords(words)}${count > shown ? ` … (${count} words)` : ''}`;
}
