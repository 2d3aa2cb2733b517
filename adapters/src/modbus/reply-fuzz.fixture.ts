import { EventEmitter } from 'node:events';
import { DomainError } from '@cresthold/shared';
import { MbapPort } from '../modbus-tcp/mbap-port.js';
import { RtuPort } from '../modbus-rtu/rtu-port.js';
import { checksumBitwise, withChecksum } from '../modbus-rtu/testing/answer-frame.js';
import { type LinkOutcome, ModbusLink } from './modbus-link.js';
import type { ModbusRequest } from './modbus-request.js';
import { mutate, seeded } from './testing/mutate.js';

interface Exchange {
  request: ModbusRequest;
  /** Unit number and PDU of the good answer. */
  answer: number[];
  /** What a good answer gives, as hex. */
  payload: string;
}

const at = { unit: 0x11, address: 0x6b };

/** One exchange for each form of answer that there is. */
const exchanges: readonly Exchange[] = [
  {
    request: { kind: 'read', table: 'holding-register', count: 3, ...at },
    answer: [0x11, 3, 6, 2, 0x2b, 0, 0, 0, 0x64],
    payload: '022b00000064',
  },
  {
    request: { kind: 'read', table: 'coil', count: 10, ...at },
    answer: [0x11, 1, 2, 0xcd, 1],
    payload: 'cd01',
  },
  {
    request: { kind: 'write-registers', words: [3], ...at },
    answer: [0x11, 6, 0, 0x6b, 0, 3],
    payload: '',
  },
  {
    request: { kind: 'write-registers', words: [10, 258], ...at },
    answer: [0x11, 16, 0, 0x6b, 0, 2],
    payload: '',
  },
  {
    request: { kind: 'mask-write', andMask: 0xf2, orMask: 0x25, ...at },
    answer: [0x11, 22, 0, 0x6b, 0, 0xf2, 0, 0x25],
    payload: '',
  },
  {
    request: { kind: 'write-and-read-back', words: [1, 2], ...at },
    answer: [0x11, 23, 4, 0, 1, 0, 2],
    payload: '00010002',
  },
];

const typedCodes = new Set(['adapter.timeout', 'adapter.corrupt', 'adapter.refused', 'adapter.disconnected']);

export interface FuzzCount {
  accepted: number;
  refused: number;
  corrupt: number;
  silent: number;
  broken: number;
}

const rtuOptions = {
  path: 'fuzz',
  t15Ms: 0,
  t35Ms: 0,
  characterMs: 0,
  hasEcho: false,
  turnaroundMs: 0,
  nowMs: () => 0,
};

class FakeWire extends EventEmitter {
  isOpen = true;
  destroyed = false;
  sent: Buffer = Buffer.alloc(0);
  write(bytes: Buffer): boolean {
    this.sent = bytes;
    return true;
  }
}

/** What is told apart by the outcome; throws where it is not one of the typed ones. */
function kindOf(outcome: LinkOutcome): keyof FuzzCount {
  if (Buffer.isBuffer(outcome)) return 'accepted';
  if (!typedCodes.has(outcome.code)) throw new Error(`not a fault of a wire: ${outcome.code}`);
  if (outcome.code === 'adapter.refused') return 'refused';
  if (outcome.code === 'adapter.corrupt') return 'corrupt';
  return outcome.code === 'adapter.timeout' ? 'silent' : 'broken';
}

const options = { label: 'fuzz', silencesUntilLost: Infinity, release: () => Promise.resolve() };
const silence = (): DomainError => new DomainError('adapter.timeout', 'nothing came that would be an answer');
const turn = (): Promise<void> => new Promise((resolve) => setImmediate(resolve));
const none = (): FuzzCount => ({ accepted: 0, refused: 0, corrupt: 0, silent: 0, broken: 0 });

/** One mutated answer to one request on a fresh wire. */
type Attempt = (exchange: Exchange, answer: number[], random: () => number) => Promise<LinkOutcome>;

async function fuzz(cases: number, seed: number, attempt: Attempt): Promise<FuzzCount> {
  const random = seeded(seed);
  const count = none();
  for (let index = 0; index < cases; index += 1) {
    const exchange = exchanges[index % exchanges.length]!;
    const [unit = 0, code = 0] = exchange.answer;
    const answer = random() < 0.1 ? [unit, code | 0x80, 2] : exchange.answer;
    count[kindOf(await attempt(exchange, answer, random))] += 1;
  }
  return count;
}

/** The outcome of an exchange once the bytes have come in; silence where there is none yet. */
async function outcomeOf(exchange: Promise<LinkOutcome>, link: ModbusLink): Promise<LinkOutcome> {
  let outcome: LinkOutcome | null = null;
  void exchange.then((settled) => (outcome = settled));
  await turn();
  const result = outcome ?? silence();
  await link.end(silence());
  return result;
}

/**
 * Sends mutated answers into the RTU codec. The line is silent after each: the wait for that is cut short.
 *
 * @throws where an answer is accepted for which no good frame, by the checksum, is among the bytes
 */
export function fuzzRtu(cases: number, seed: number): Promise<FuzzCount> {
  return fuzz(cases, seed, async ({ request }, answer, random) => {
    const wire = new FakeWire();
    const port = new RtuPort(wire, rtuOptions);
    const link = new ModbusLink(port, options);
    const exchange = link.exchange(request, 60_000);
    const bytes = mutate(withChecksum(answer), random);
    wire.emit('data', bytes);
    port.listenNoMore();
    const outcome = await outcomeOf(exchange, link);
    if (Buffer.isBuffer(outcome) && !holdsGoodFrame(bytes, answer[0]!, answer[1]!, outcome)) {
      throw new Error(`accepted ${outcome.toString('hex')} from ${bytes.toString('hex')}`);
    }
    return outcome;
  });
}

/**
 * Sends mutated answers into the TCP codec, which has no checksum: header and form are all that can be judged.
 *
 * @throws where a payload of another length than asked for is accepted
 */
export function fuzzTcp(cases: number, seed: number): Promise<FuzzCount> {
  return fuzz(cases, seed, async ({ request, payload }, answer, random) => {
    const wire = new FakeWire();
    const link = new ModbusLink(new MbapPort(wire as never, 'fuzz'), options);
    const exchange = link.exchange(request, 60_000);
    const header = Buffer.from([...wire.sent.subarray(0, 4), 0, answer.length]);
    wire.emit('data', mutate(Buffer.concat([header, Buffer.from(answer)]), random));
    const outcome = await outcomeOf(exchange, link);
    if (Buffer.isBuffer(outcome) && outcome.length !== payload.length / 2) {
      throw new Error(`a payload of ${outcome.length} bytes instead of ${payload.length / 2}`);
    }
    return outcome;
  });
}

/** Whether a frame of that unit and function, with that payload and a good checksum, is among the bytes. */
function holdsGoodFrame(bytes: Buffer, unit: number, code: number, payload: Buffer): boolean {
  for (let from = 0; from + 5 <= bytes.length; from += 1) {
    if (bytes[from] !== unit || bytes[from + 1] !== code) continue;
    for (let to = from + 5; to <= bytes.length; to += 1) {
      if (checksumBitwise(bytes.subarray(from, to)) === 0 && bytes.subarray(from, to).includes(payload))
        return true;
    }
  }
  return false;
}
