import { afterEach, describe, expect, it } from 'vitest';
import { openText, readText, textAddress } from './testing/open-text.js';
import { ScriptedInstrument, type Script } from './testing/scripted-instrument.js';

let instrument: ScriptedInstrument;
afterEach(() => instrument.stop());

/** Answers each query with its own number, so that a mix-up shows. */
const numbered: Script = (command) => (command.startsWith('Q') ? `${command.slice(1, -1)}\n` : null);
const fast = { replyTimeoutMs: 150, resyncMs: 150, timeoutMs: 3000, silencesUntilLost: 1000 };
const wait = (delayMs: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, delayMs));

describe('a late reply', () => {
  it.each([20, 60])('that comes %d ms after its time is never taken for the next one', async (latenessMs) => {
    instrument = new ScriptedInstrument(numbered);
    const pass = instrument.transmit;
    const session = await openText(instrument.path, fast);
    // The device answers in order: a command that comes too early is answered right after the late reply.
    const owed: Buffer[] = [];
    instrument.transmit = (bytes) => {
      if (owed.push(bytes) > 1) return;
      setTimeout(() => {
        instrument.transmit = pass;
        for (const late of owed) pass(late);
      }, fast.replyTimeoutMs + latenessMs);
    };
    const [first, second] = await readText(session, { query: 'Q1?' }, { query: 'Q2?' });
    expect(first).toMatch(/^adapter\.timeout: .*"Q1\?": no reply in time/);
    expect(second).toBe(2);
    expect(await readText(session, { query: 'Q3?' }, { query: 'Q4?' })).toEqual([3, 4]);
    await session.close();
  });

  it('is passed by with the help of the identification, however late it is', async () => {
    const script: Script = (command) => (command === '*IDN?' ? 'Brackwater,X\n' : numbered(command));
    instrument = new ScriptedInstrument(script);
    const pass = instrument.transmit;
    const session = await openText(instrument.path, { ...fast, resyncMs: 5, identification: 'Brackwater,*' });
    const owed: Buffer[] = [];
    instrument.transmit = (bytes) => owed.push(bytes);
    expect((await readText(session, { query: 'Q1?' }))[0]).toMatch(/^adapter\.timeout/);
    // Long silence; the reply to Q1? comes only when the next command is on its way already.
    await wait(30);
    instrument.transmit = (bytes) => {
      instrument.transmit = pass;
      for (const late of owed.splice(0)) pass(late);
      pass(bytes);
    };
    expect(await readText(session, { query: 'Q2?' }, { query: 'Q3?' })).toEqual([2, 3]);
    await session.close();
  });
});

describe('noise', () => {
  it.each([
    ['before a reply, on its line', '\x00\xfe#1;', ''],
    ['before a reply, as a line', 'noise\n', ''],
    ['after a reply, without an end', '', '\x00\xff,'],
    ['after a reply, as a line', '', 'noise\n'],
  ])('%s costs one reply at most, and never gives a wrong value', async (_name, before, after) => {
    instrument = new ScriptedInstrument(numbered);
    const pass = instrument.transmit;
    const session = await openText(instrument.path, fast);
    instrument.transmit = (bytes) => {
      pass(Buffer.concat([Buffer.from(before, 'latin1'), bytes, Buffer.from(after, 'latin1')]));
      instrument.transmit = pass;
    };
    const [first, second] = await readText(session, { query: 'Q11?' }, { query: 'Q22?' });
    const faults = [first, second].filter((outcome) => typeof outcome === 'string');
    for (const fault of faults) expect(fault).toMatch(/^adapter\.corrupt/);
    expect(faults.length).toBeLessThan(2);
    if (before === '') expect(first).toBe(11);
    else expect(second).toBe(22);
    expect([22, faults[0]]).toContain(second);
    expect(await readText(session, { query: 'Q33?' })).toEqual([33]);
    await session.close();
  });

  it('cut anywhere, a reply is the same', async () => {
    instrument = new ScriptedInstrument(numbered);
    const pass = instrument.transmit;
    const session = await openText(instrument.path, { ...fast, replyTerminator: '\\n' });
    for (let cut = 1; cut < 6; cut += 1) {
      instrument.transmit = (bytes) => {
        pass(bytes.subarray(0, cut));
        setTimeout(pass, 3, bytes.subarray(cut));
      };
      expect(await readText(session, { query: 'Q1.25?' })).toEqual([1.25]);
    }
    await session.close();
  });
});

describe('time', () => {
  it('is given to a long reply for as long as it keeps coming', async () => {
    instrument = new ScriptedInstrument(() => null);
    const session = await openText(instrument.path, { ...fast, replyTimeoutMs: 250 });
    const reading = readText(session, { query: 'Q?' });
    await expect.poll(() => instrument.commands.length).toBe(1);
    for (const part of ['1', '.', '2', '5', '\n']) {
      instrument.send(part);
      await wait(90);
    }
    expect(await reading).toEqual([1.25]);
    await session.close();
  });

  it('tells of a reply that does not end, as with a wrong terminator', async () => {
    instrument = new ScriptedInstrument(() => '1.25\r');
    const session = await openText(instrument.path, fast);
    expect((await readText(session, { query: 'Q?' }))[0]).toMatch(
      /^adapter\.timeout: .*the reply "1\.25\\r" did not end in time/,
    );
    await session.close();
  });

  it('is not eaten by a silent query: the others are asked first from then on', async () => {
    instrument = new ScriptedInstrument((command) => (command === 'Q1?' ? null : numbered(command)));
    const session = await openText(instrument.path, fast);
    const plan = session.planRead(['Q1?', 'Q2?', 'Q3?'].map((query) => textAddress({ query })));
    await session.read(plan);
    instrument.commands.length = 0;
    const { values } = await session.read(plan);
    expect([...values]).toEqual([NaN, 2, 3]);
    expect(instrument.commands).toEqual(['Q2?', 'Q3?', 'Q1?']);
    await session.close();
  });

  it('passes between commands where a pause is asked for', async () => {
    const times: number[] = [];
    instrument = new ScriptedInstrument((command) => {
      times.push(performance.now());
      return numbered(command);
    });
    const session = await openText(instrument.path, { ...fast, commandGapMs: 40 });
    expect(await readText(session, { query: 'Q1?' }, { query: 'Q2?' }, { query: 'Q3?' })).toEqual([1, 2, 3]);
    // The clock of the test sees the commands when they arrive: a little grace for the way there.
    expect((times[2] ?? 0) - (times[0] ?? 0)).toBeGreaterThan(60);
    await session.close();
  });
});

it('a device that stays silent is lost after so many commands', async () => {
  instrument = new ScriptedInstrument(() => null);
  const session = await openText(instrument.path, {
    ...fast,
    replyTimeoutMs: 10,
    resyncMs: 5,
    silencesUntilLost: 3,
  });
  const plan = session.planRead(['A?', 'B?', 'C?', 'D?'].map((query) => textAddress({ query })));
  const { lost, faults } = await session.read(plan);
  expect(lost?.code).toBe('adapter.disconnected');
  expect(lost?.message).toContain('3 commands in a row were left unanswered');
  expect(new Set(faults.map((fault) => fault?.code))).toEqual(new Set(['adapter.disconnected']));
  await session.close();
});
