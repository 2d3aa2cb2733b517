import type { Adapter, AdapterSession, ReadOutcome, WriteOutcome } from '@cresthold/adapters';
import { DomainError, Quality, Readings, rigSchema } from '@cresthold/shared';
import { z } from 'zod';
import { Wire } from '../../src/rig-host/wire.js';

/** A device that answers only when the test says so. */
class SlowDevice {
  opens = 0;
  readonly written: number[][] = [];
  private waitingRead: ((outcome: ReadOutcome) => void) | null = null;
  private waitingWrite: ((outcome: WriteOutcome) => void) | null = null;
  isSlow = false;
  faults: (DomainError | null)[] = [null];
  value = 1;

  readonly adapter: Adapter = {
    manifest: {
      id: 'slow',
      title: 'Slow',
      contract: '^1.0.0',
      configurationSchema: z.unknown(),
      addressSchema: z.unknown(),
    },
    open: () => {
      this.opens += 1;
      return Promise.resolve(this.session());
    },
  };

  answerRead(lost: DomainError | null = null): void {
    this.waitingRead?.({ values: Float64Array.of(this.value), faults: this.faults, lost });
    this.waitingRead = null;
  }

  answerWrite(fault: DomainError | null = null): void {
    this.waitingWrite?.({ faults: [fault], lost: null });
    this.waitingWrite = null;
  }

  private session(): AdapterSession<unknown> {
    return {
      describe: () => ({ isWritable: true, quantum: 0.5, quantumOrigin: 0, min: 0, max: 10 }),
      planRead: (addresses) => ({ count: addresses.length, requests: 1 }),
      read: () =>
        new Promise((resolve) => {
          this.waitingRead = resolve;
          if (!this.isSlow) this.answerRead();
        }),
      write: (_, values) =>
        new Promise((resolve) => {
          this.written.push(Array.from(values));
          this.waitingWrite = resolve;
          if (!this.isSlow) this.answerWrite();
        }),
      close: () => Promise.resolve(),
    };
  }
}

function rigOf(adapters: string[]) {
  const display = { min: 0, max: 1, decimals: 0 };
  return rigSchema.parse({
    id: 'rig',
    title: 'Rig',
    periodMs: 1,
    connections: adapters.map((adapter) => ({ id: adapter, title: adapter, adapter, configuration: {} })),
    channels: adapters.map((adapter) => ({
      kind: 'actuator',
      id: adapter,
      title: adapter,
      display,
      connection: adapter,
      address: {},
    })),
  });
}

describe('wire', () => {
  let first: SlowDevice;
  let second: SlowDevice;
  let readings: Readings;
  let wire: Wire;
  beforeEach(async () => {
    first = new SlowDevice();
    second = new SlowDevice();
    const rig = rigOf(['first', 'second']);
    readings = new Readings(['first', 'second']);
    const adapters = new Map([
      ['first', first.adapter],
      ['second', second.adapter],
    ]);
    const ignore = () => undefined;
    wire = new Wire(rig, adapters, readings, ignore, ignore, (error) => {
      throw error;
    });
    await wire.open(1000);
  });
  afterEach(() => wire.close());

  it('gives good readings, and the grid of each actuator once it is open', async () => {
    await wire.read();
    expect([...readings.qualities]).toEqual([Quality.good, Quality.good]);
    expect(wire.grids()).toEqual([
      ['first', { step: 0.5, origin: 0 }],
      ['second', { step: 0.5, origin: 0 }],
    ]);
    expect(wire.takeLost()).toEqual([]);
  });

  it('is not held up by a connection that does not answer: its channel is stale, the last value kept', async () => {
    await wire.read();
    first.isSlow = true;
    first.value = 7;
    second.value = 2;
    await wire.read();
    expect([...readings.qualities]).toEqual([Quality.stale, Quality.good]);
    expect([...readings.values]).toEqual([1, 2]);
    first.answerRead();
    await wire.read();
    expect(readings.values[0]).toBe(7);
    expect(readings.isGood(0)).toBe(true);
  });

  it('makes a value that is not finite bad, and a refused one as well', async () => {
    first.value = NaN;
    second.faults = [new DomainError('adapter.refused')];
    await wire.read();
    expect([...readings.qualities]).toEqual([Quality.bad, Quality.bad]);
  });

  it('says of each channel that does not come through why, and no longer once it does', async () => {
    await wire.read();
    expect(wire.channelFaults()).toEqual([]);
    first.value = NaN;
    second.faults = [new DomainError('adapter.refused', 'Register 5 is refused.')];
    await wire.read();
    expect(wire.channelFaults()).toEqual([
      { channel: 'first', code: 'adapter.corrupt', message: expect.stringContaining('no number') },
      { channel: 'second', code: 'adapter.refused', message: 'Register 5 is refused.' },
    ]);
    first.value = 1;
    second.faults = [null];
    await wire.read();
    expect(wire.channelFaults()).toEqual([]);
  });

  it('sends only the newest value once a busy device is free again', async () => {
    await wire.write([{ channel: 'first', value: 1 }]);
    first.isSlow = true;
    const late = wire.write([{ channel: 'first', value: 2 }]);
    await wire.write([{ channel: 'first', value: 3 }]);
    await wire.write([{ channel: 'first', value: 4 }]);
    first.isSlow = false;
    first.answerWrite();
    await late;
    expect(first.written).toEqual([[1], [2], [4]]);
  });

  it('writes again what the device did not take, unless there is something newer', async () => {
    first.isSlow = true;
    let written = wire.write([{ channel: 'first', value: 5 }]);
    first.answerWrite(new DomainError('adapter.timeout'));
    await written;
    written = wire.write([]);
    first.answerWrite(new DomainError('adapter.timeout'));
    await written;
    written = wire.write([{ channel: 'first', value: 6 }]);
    first.answerWrite();
    await written;
    expect(first.written).toEqual([[5], [5], [6]]);
    expect(wire.write([])).toBeNull();
  });

  it('tells of a loss that was over before the next scan, and drops what waited to be written', async () => {
    first.isSlow = true;
    const reading = wire.read();
    first.answerRead(new DomainError('adapter.disconnected', 'Cut.'));
    await reading;
    expect(readings.qualities[0]).toBe(Quality.missing);
    first.isSlow = false;
    void wire.write([{ channel: 'first', value: 9 }]);
    while (first.opens < 2) await new Promise((resolve) => setTimeout(resolve, 10));
    await wire.read();
    expect(readings.isGood(0)).toBe(true);
    expect(wire.takeLost()).toEqual([{ connection: 'first', code: 'adapter.disconnected', message: 'Cut.' }]);
    expect(wire.takeLost()).toEqual([]);
    expect(first.written).toEqual([]);
  });
});
