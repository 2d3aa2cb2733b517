import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openText, readText, textAddress } from './testing/open-text.js';
import { ScriptedInstrument } from './testing/scripted-instrument.js';

/**
 * An instrument after IEEE 488.2 and SCPI-1999: event status register, status byte, error queue. The numbers are those
 * of the standards (ESR bits 11.5.1, STB 11.2; errors volume 2, 21.8), as a public parser has them.
 */
class TextbookInstrument {
  esr = 128;
  readonly errors: string[] = [];
  volts = 0;
  readonly wire = new ScriptedInstrument((command) => this.answer(command));

  private fail(bit: number, error: string): null {
    this.esr |= bit;
    this.errors.push(error);
    return null;
  }

  private answer(command: string): string | null {
    const [header = '', parameter] = command.split(' ');
    switch (header) {
      case '*CLS':
        this.esr = 0;
        this.errors.length = 0;
        return null;
      case '*IDN?':
        return 'Brackwater,MODEL 12,0,1.0\n';
      case '*ESR?': {
        const { esr } = this;
        this.esr = 0;
        return `${esr}\n`;
      }
      case '*STB?':
        // Bit 2 (4) says that the error queue is not empty.
        return `${this.errors.length > 0 ? 4 : 0}\n`;
      case 'SYST:ERR?':
        return `${this.errors.shift() ?? '0,"No error"'}\n`;
      case 'SYST:VERS?':
        return '1999.0\n';
      case '*OPC?':
        return '1\n';
      case 'SOUR:VOLT?':
        return `${this.volts.toExponential(6).toUpperCase()}\n`;
      case 'SOUR:VOLT':
        if (parameter === undefined) return this.fail(32, '-109,"Missing parameter"');
        if (Number(parameter) > 30) return this.fail(16, '-222,"Data out of range"');
        this.volts = Number(parameter);
        return null;
      default:
        return this.fail(32, '-113,"Undefined header"');
    }
  }
}

const voltage = textAddress({ query: 'SOUR:VOLT?', write: 'SOUR:VOLT {value}', decimals: 2 });
const wrong = textAddress({ write: 'SOUR:VOLTS {value}' });
const fast = { replyTimeoutMs: 250, resyncMs: 60, timeoutMs: 3000 };

let instrument: TextbookInstrument;
beforeEach(() => {
  instrument = new TextbookInstrument();
});
afterEach(() => instrument.wire.stop());

describe('an instrument with an error queue', () => {
  it('names an error at the write that caused it, in its own words', async () => {
    const session = await openText(instrument.wire.path, { profile: 'scpi-meter', ...fast });
    const { faults, lost } = await session.write([voltage, wrong, voltage, voltage], [12.5, 1, 31, 7]);
    expect(lost).toBeNull();
    expect(faults.map((fault) => fault?.code ?? null)).toEqual([
      null,
      'adapter.refused',
      'adapter.refused',
      null,
    ]);
    expect(faults[1]?.message).toContain('"SOUR:VOLTS 1.000": the device reports -113,"Undefined header".');
    expect(faults[2]?.message).toContain('-222,"Data out of range"');
    expect(instrument.volts).toBe(7);
    expect(await readText(session, voltage)).toEqual([7]);
    await session.close();
  });

  it('says why it sends no reply to a query that it does not know', async () => {
    const session = await openText(instrument.wire.path, { profile: 'scpi-meter', ...fast });
    const [good, bad, version] = await readText(
      session,
      { query: 'SOUR:VOLT?' },
      { query: 'MEAS:MAGIC?' },
      { query: 'SYST:VERS?' },
    );
    expect([good, version]).toEqual([0, 1999]);
    expect(bad).toMatch(/^adapter\.refused: .*"MEAS:MAGIC\?": the device reports -113,"Undefined header"\.$/);
    await session.close();
  });

  it('is not blamed at a write for what a query or a refused write before it did', async () => {
    const session = await openText(instrument.wire.path, {
      profile: 'scpi-meter',
      refusals: ['NO*'],
      ...fast,
    });
    const script = instrument.wire.script;
    instrument.wire.script = (command) => {
      if (!command.startsWith('ODD')) return script(command);
      instrument.errors.push('-200,"Execution error"');
      return command === 'ODD?' ? 'no number\n' : 'NO\n';
    };
    const odd = textAddress({ query: 'ODD?', write: 'ODD {value}', acknowledgement: 'OK' });
    const { faults } = await session.write([odd, voltage], [1, 2]);
    expect(faults.map((fault) => fault?.message.replace(/^.*: /, '') ?? null)).toEqual([
      'the device reports -200,"Execution error".',
      null,
    ]);
    instrument.wire.script = (command) => {
      if (command === 'ODD?') instrument.errors.push('-200,"Execution error"');
      return command === 'ODD?' ? 'NO\n' : script(command);
    };
    expect((await readText(session, odd))[0]).toMatch(/^adapter\.refused/);
    expect((await session.write([voltage], [3])).faults).toEqual([null]);
    await session.close();
  });

  it('is asked for errors every so many scans where each write would be too often', async () => {
    const rarely = { profile: 'scpi-meter', hasErrorCheckAfterWrite: false, errorCheckScans: 3, ...fast };
    const session = await openText(instrument.wire.path, rarely);
    const before = instrument.wire.commands.filter((command) => command === 'SYST:ERR?').length;
    expect((await session.write([voltage, wrong], [1, 1])).faults).toEqual([null, null]);
    const plan = session.planRead([voltage]);
    for (let scan = 0; scan < 3; scan += 1) expect((await session.read(plan)).faults).toEqual([null]);
    const asked = instrument.wire.commands.filter((command) => command === 'SYST:ERR?').length - before;
    expect(asked).toBe(2);
    const { faults } = await session.write([voltage, wrong], [2, 2]);
    expect(faults[1]?.message).toContain('Reported after an earlier write of this channel');
    expect(faults[1]?.message).toContain('-113');
    await session.close();
  });

  it('makes the readings of a scan doubtful by an error that no write explains', async () => {
    const session = await openText(instrument.wire.path, {
      profile: 'scpi-meter',
      errorCheckScans: 1,
      ...fast,
    });
    instrument.errors.push('-230,"Data corrupt or stale"');
    expect((await readText(session, voltage))[0]).toMatch(/^adapter\.refused: .*-230/);
    expect(await readText(session, voltage)).toEqual([0]);
    await session.close();
  });

  it('is not blamed for errors that it had before', async () => {
    instrument.errors.push('-100,"Command error"');
    const session = await openText(instrument.wire.path, {
      profile: 'scpi-meter',
      initialCommands: [],
      ...fast,
    });
    expect((await session.write([voltage], [1])).faults).toEqual([null]);
    await session.close();
  });

  it('that does not take an initial command cannot be opened', async () => {
    const opening = openText(instrument.wire.path, {
      profile: 'scpi-meter',
      initialCommands: ['NONSENSE'],
      ...fast,
    });
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.refused',
      message: expect.stringContaining('initial commands: the device reports -113,"Undefined header"'),
    });
  });
});

describe('an instrument with an event status register alone', () => {
  it('names the kind of error at the write that caused it', async () => {
    const session = await openText(instrument.wire.path, { profile: 'ieee-488-2', ...fast });
    const { faults } = await session.write([voltage, wrong, voltage, voltage], [5, 1, 99, 6]);
    expect(faults.map((fault) => fault?.message.replace(/^.*: /, '') ?? null)).toEqual([
      null,
      'the device reports event status 32 (command error).',
      'the device reports event status 16 (execution error).',
      null,
    ]);
    // The profile's own channels read as the standard says.
    expect(await readText(session, { query: '*STB?' }, { query: '*OPC?' })).toEqual([4, 1]);
    await session.close();
  });
});

describe('the identification', () => {
  it('must fit, or the port is not used', async () => {
    const session = await openText(instrument.wire.path, { identification: '*,MODEL 12,*', ...fast });
    await session.close();
    const opening = openText(instrument.wire.path, { identification: '*,MODEL 13,*', ...fast });
    await expect(opening).rejects.toMatchObject({
      code: 'adapter.misconfigured',
      message: expect.stringContaining('"Brackwater,MODEL 12,0,1.0", which does not fit "*,MODEL 13,*"'),
    });
  });

  it('of a silent device is adapter.timeout, and can be cancelled', async () => {
    instrument.wire.script = () => null;
    const settings = { identification: '*', replyTimeoutMs: 100 };
    await expect(openText(instrument.wire.path, settings)).rejects.toMatchObject({ code: 'adapter.timeout' });
    const abort = new AbortController();
    const patientSettings = {
      identification: '*',
      replyTimeoutMs: 60_000,
      timeoutMs: 60_000,
      openTimeoutMs: 60_000,
    };
    const opening = openText(instrument.wire.path, patientSettings, abort.signal);
    setTimeout(() => {
      abort.abort();
    }, 30);
    await expect(opening).rejects.toMatchObject({ code: 'adapter.cancelled' });
  });
});

describe('a write that is read back', () => {
  const back = { query: 'SOUR:VOLT?', write: 'SOUR:VOLT {value}', decimals: 2, hasReadback: true };

  it('is taken where the device holds the value, and refused where it does not', async () => {
    const session = await openText(instrument.wire.path, fast);
    const { faults } = await session.write([textAddress(back), textAddress(back)], [12.344, 40]);
    expect(faults[0]).toBeNull();
    expect(faults[1]?.code).toBe('adapter.refused');
    expect(faults[1]?.message).toContain('the device holds 12.34, not 40');
    await session.close();
  });
});
