import { afterEach, describe, expect, it } from 'vitest';
import { openText, patient, readText, textAddress } from './testing/open-text.js';
import { ScriptedInstrument } from './testing/scripted-instrument.js';

let instrument: ScriptedInstrument;
afterEach(() => instrument.stop());

const fast = { replyTimeoutMs: 250, resyncMs: 60, timeoutMs: 3000 };

// Seen in public protocol tests (GGA) and from memory (RMC).
const gga = '$GPGGA,123519,4807.038,N,01131.000,E,1,08,0.9,545.4,M,46.9,M,,*47\r\n';
const rmc = '$GPRMC,123519,A,4807.038,N,01131.000,E,022.4,084.4,230394,003.1,W*6A\r\n';

describe('a talker of sentences', () => {
  const altitude = { stream: '$??GGA,*', field: 9 };
  const latitude = { stream: '$??GGA,*', field: 2, notation: 'degrees-minutes', signField: 3 } as const;
  const isValid = { stream: '$??RMC,*', field: 2, words: { A: 1, V: 0 } };

  it('feeds channels by itself, and one bad checksum feeds none', async () => {
    instrument = new ScriptedInstrument(() => null, '\r\n');
    const session = await openText(instrument.path, { profile: 'nmea-0183', ...fast });
    const plan = session.planRead([altitude, latitude, isValid].map(textAddress));
    expect(plan.requests).toBe(0);
    const before = await session.read(plan);
    expect(before.faults.map((fault) => fault?.code)).toEqual(new Array(3).fill('adapter.timeout'));
    instrument.send(`noise${gga}${rmc}`);
    await expect.poll(async () => (await session.read(plan)).faults, patient).toEqual([null, null, null]);
    const { values } = await session.read(plan);
    expect([values[0], values[2]]).toEqual([545.4, 1]);
    expect(values[1]).toBeCloseTo(48.1173, 9);
    instrument.send(gga.replace('545.4', '645.4'));
    instrument.send(rmc.replace(',A,', ',V,').replace('*6A', '*7D'));
    await expect.poll(async () => (await session.read(plan)).values[2], patient).toBe(0);
    expect((await session.read(plan)).values[0]).toBe(545.4);
    expect(instrument.commands).toEqual([]);
    await session.close();
  });

  it('is missing when its lines are too old', async () => {
    instrument = new ScriptedInstrument(() => null, '\r\n');
    const session = await openText(instrument.path, { profile: 'nmea-0183', ...fast });
    const young = { ...altitude, mostAgeMs: 60 };
    const plan = session.planRead([textAddress(young)]);
    instrument.send(gga);
    await expect.poll(async () => (await session.read(plan)).values[0], patient).toBe(545.4);
    await expect
      .poll(async () => (await session.read(plan)).faults[0]?.code, patient)
      .toBe('adapter.timeout');
    await session.close();
  });

  it('answers queries between its own lines', async () => {
    // By hand: 50 ^ 51 ^ 2C ^ 31 is 1C.
    instrument = new ScriptedInstrument((command) => {
      return command === '$PQ,1*1C' ? `${gga}noise without an end${rmc}R\r\n` : null;
    }, '\r\n');
    const settings = { profile: 'nmea-0183', checksumOn: 'requests', unsolicited: ['*$G*'], ...fast };
    const session = await openText(instrument.path, settings);
    const [value] = await readText(session, { query: '$PQ,1', words: { R: 5 } });
    expect(value).toBe(5);
    await session.close();
  });

  it('is probed by waiting for its next line', async () => {
    instrument = new ScriptedInstrument(() => null, '\r\n');
    const session = await openText(instrument.path, { profile: 'nmea-0183', ...fast });
    const probing = session.probe?.(textAddress(altitude));
    instrument.send(gga);
    const outcome = await probing;
    expect(outcome).toMatchObject({ value: 545.4, fault: null, trace: null });
    expect(outcome?.raw).toBe('received: $GPGGA,123519,4807.038,N,01131.000,E,1,08,0.9,545.4,M,46.9,M,,');
    await session.close();
  });
});

describe('a device with an echo', () => {
  it.each([
    ['\\r', '\r', '\r\n'],
    ['\\r\\n', '\r\n', '\r\n'],
    ['\\n', '\n', '\n'],
  ])('has it dropped where commands end in %s', async (requestTerminator, heard, reply) => {
    instrument = new ScriptedInstrument(
      (command) => `${command}${heard}${command === 'Q?' ? `1.5${reply}` : ''}`,
      heard,
    );
    const replyTerminator = reply === '\n' ? '\\n' : '\\r\\n';
    const session = await openText(instrument.path, {
      hasEcho: true,
      requestTerminator,
      replyTerminator,
      ...fast,
    });
    const both = textAddress({ query: 'Q?', write: 'S {value}', decimals: 0 });
    for (let round = 0; round < 3; round += 1) {
      expect((await session.write([both], [round])).faults).toEqual([null]);
      expect(await readText(session, both)).toEqual([1.5]);
    }
    expect(instrument.commands).toEqual(['S 0', 'Q?', 'S 1', 'Q?', 'S 2', 'Q?']);
    await session.close();
  });

  it('is corrupt where the echo is another command, and silent where there is none', async () => {
    instrument = new ScriptedInstrument(() => 'X?\n1.5\n');
    const session = await openText(instrument.path, { hasEcho: true, ...fast });
    expect((await readText(session, { query: 'Q?' }))[0]).toMatch(
      /^adapter\.corrupt: .*the echo is not what was sent/,
    );
    instrument.script = () => null;
    expect((await readText(session, { query: 'Q?' }))[0]).toMatch(/^adapter\.timeout/);
    instrument.script = (command) => `${command}\n2.5\n`;
    expect(await readText(session, { query: 'Q?' })).toEqual([2.5]);
    await session.close();
  });
});

describe('checksums', () => {
  it('are appended to commands and verified on replies', async () => {
    // Recomputed by hand: "Q?" is 51 + 3F = 90; "1.5" is 31 + 2E + 35 = 94.
    instrument = new ScriptedInstrument((command) => (command === 'Q?90' ? '1.594\n' : null));
    const session = await openText(instrument.path, { checksum: 'sum-8', ...fast });
    expect(await readText(session, { query: 'Q?' })).toEqual([1.5]);
    instrument.script = () => '1.595\n';
    expect((await readText(session, { query: 'Q?' }))[0]).toMatch(
      /^adapter\.corrupt: .*"1\.595": its checksum is 95, 94 is due/,
    );
    await session.close();
  });
});

describe('queries', () => {
  it('are shared by the channels that ask the same', async () => {
    instrument = new ScriptedInstrument((command) => (command === 'MEAS? 2' ? '1.5,OVLD,ON\n' : 'ERR\n'));
    const session = await openText(instrument.path, { refusals: ['ERR*'], ...fast });
    const query = 'MEAS? {channel}';
    const plan = session.planRead(
      [
        { query, channel: '2' },
        { query, channel: '2', field: 1, specials: ['OVLD'] },
        { query, channel: '2', field: 2, words: { ON: 1 } },
        { query, channel: '2', field: 3 },
        { query, channel: '3' },
      ].map(textAddress),
    );
    expect(plan.requests).toBe(2);
    const { values, faults } = await session.read(plan);
    expect([...values]).toEqual([1.5, NaN, 1, NaN, NaN]);
    expect(faults.map((fault) => fault?.code ?? null)).toEqual([
      null,
      null,
      null,
      'adapter.corrupt',
      'adapter.refused',
    ]);
    expect(instrument.commands).toEqual(['MEAS? 2', 'MEAS? 3']);
    await session.close();
  });

  it('show what went over the wire when they are tried', async () => {
    instrument = new ScriptedInstrument(() => '+1.25E+00\r\n');
    const session = await openText(instrument.path, fast);
    expect(await session.probe?.(textAddress({ query: 'MEAS?' }))).toEqual({
      raw: 'sent: MEAS?\\n\nreceived: +1.25E+00',
      value: 1.25,
      trace: null,
      fault: null,
    });
    instrument.script = () => 'what?\n';
    const failed = await session.probe?.(textAddress({ query: 'MEAS?' }));
    expect(failed).toMatchObject({
      raw: 'sent: MEAS?\\n\nreceived: what?',
      fault: { code: 'adapter.corrupt' },
    });
    await session.close();
  });
});

describe('traces', () => {
  const points = 1024;
  const wave = Float64Array.from({ length: points }, (_, point) => Math.fround(Math.sin(point / 20)));

  it('come as a block of bytes and as a list, beside a value, in one read', async () => {
    const block = Buffer.alloc(points * 4);
    wave.forEach((value, point) => block.writeFloatBE(value, point * 4));
    instrument = new ScriptedInstrument((command) => {
      if (command === 'BLOCK?') return Buffer.concat([Buffer.from('#44096'), block, Buffer.from('\n')]);
      return command === 'LIST?' ? `${[...wave].join(',')}\n` : '5\n';
    });
    const session = await openText(instrument.path, { ...fast, timeoutMs: 5000 });
    const addresses = [
      textAddress({ query: 'BLOCK?', shape: 'block', points }),
      textAddress({ query: 'ONE?' }),
      textAddress({ query: 'LIST?', shape: 'list', points }),
    ] as const;
    const plan = session.planRead(addresses);
    for (let scan = 0; scan < 3; scan += 1) {
      const { values, faults, traces } = await session.read(plan);
      expect(faults).toEqual([null, null, null]);
      expect([...values]).toEqual([NaN, 5, NaN]);
      expect(traces).toEqual([wave, null, wave]);
    }
    expect(session.describe(addresses[0]).points).toBe(points);
    const probed = await session.probe?.(addresses[0]);
    expect(probed?.trace).toEqual(wave);
    expect(probed?.raw).toMatch(/^sent: BLOCK\?\\n\nreceived: #\.\.\. 4096 bytes: 00 00 00 00/);
    await session.close();
  });

  it('of a wrong length, or a line in their place, are corrupt, and the next one is right', async () => {
    instrument = new ScriptedInstrument(() => '#12\n\n\n');
    const session = await openText(instrument.path, fast);
    const trace = textAddress({ query: 'B?', shape: 'block', points: 4, sampleType: 'u8' });
    const plan = session.planRead([trace]);
    const wrong = await session.read(plan);
    expect([wrong.faults[0]?.code, [...(wrong.traces?.[0] ?? [])]]).toEqual([
      'adapter.corrupt',
      [NaN, NaN, NaN, NaN],
    ]);
    instrument.script = () => 'no trace\n';
    expect((await session.read(plan)).faults[0]?.message).toContain('a line came in place of a block');
    instrument.script = () => '#14\n#1\n\n';
    const { faults, traces } = await session.read(plan);
    expect([faults[0], [...(traces?.[0] ?? [])]]).toEqual([null, [10, 35, 49, 10]]);
    await session.close();
  });
});
