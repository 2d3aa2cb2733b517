import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { fieldFaultsOf } from '../parse-or-misconfigured.js';
import { instrumentProfiles } from './instrument-profiles.js';
import { serialTextAddressSchema } from './serial-text-address.schema.js';
import { serialTextConfigurationSchema } from './serial-text-configuration.schema.js';
import { serialTextAdapter } from './serial-text.adapter.js';
import { textAddress } from './testing/open-text.js';

const path = '/dev/ttyUSB0';
const configured = (more: object) => serialTextConfigurationSchema.parse({ path, ...more });

describe('a configuration', () => {
  it('needs a path alone; the rest is of the profile, or else of the adapter', () => {
    expect(configured({})).toMatchObject({
      profile: 'none',
      baudRate: 9600,
      replyTimeoutMs: 500,
      resyncMs: 500,
    });
    expect(configured({ replyTimeoutMs: 80 })).toMatchObject({ resyncMs: 80 });
    expect(configured({ profile: 'nmea-0183' })).toMatchObject({ baudRate: 4800, checksum: 'nmea-xor' });
    expect(configured({ profile: 'nmea-0183', checksum: 'none' })).toMatchObject({ checksum: 'none' });
  });

  it('stays what it is when it is parsed again', () => {
    for (const { id } of instrumentProfiles) {
      const once = configured({ profile: id });
      expect(serialTextConfigurationSchema.parse(once)).toEqual(once);
    }
  });

  it.each([
    [{ path: '' }, 'path'],
    [{ baudRate: 10 }, 'baudRate'],
    [{ parity: 'mark' }, 'parity'],
    [{ profile: 'wonder' }, 'profile'],
    [{ replyTerminator: '' }, 'replyTerminator'],
    [{ replyTerminator: '\\q' }, 'replyTerminator'],
    [{ requestTerminator: '\n' }, 'requestTerminator'],
    [{ unsolicited: [''] }, 'unsolicited[0]'],
    [{ rs485: 'rts-high', flowControl: 'rts-cts' }, 'flowControl'],
    [{ characters: 'latin1', dataBits: 7 }, 'characters'],
    [{ timeoutMs: 100 }, 'timeoutMs'],
    [{ speed: 9600 }, ''],
  ])('with %o is refused at %s', (change, field) => {
    const faults = fieldFaultsOf(serialTextConfigurationSchema, { path, ...change });
    expect(faults.map((fault) => fault.field)).toEqual([field]);
  });
});

describe('an address', () => {
  it.each([
    [{}, 'query'],
    [{ query: 'Q?', stream: '$*' }, 'stream'],
    [{ query: 'Q {value}' }, 'query'],
    [{ write: 'W {chanel} {value}' }, 'write'],
    [{ write: 'W' }, 'write'],
    [{ query: 'Q?', channel: 'a\nb' }, 'channel'],
    [{ query: 'Q?', shape: 'list' }, 'points'],
    [{ query: 'Q?', points: 5 }, 'points'],
    [{ query: 'Q?', shape: 'list', points: 5, write: 'W {value}' }, 'write'],
    [{ query: 'Q?', shape: 'list', points: 5, signField: 1 }, 'signField'],
    [{ query: 'Q?', shape: 'list', points: 5, notation: 'degrees-minutes' }, 'notation'],
    [{ write: 'W {value}', hasReadback: true }, 'hasReadback'],
    [{ query: 'Q?', scale: 0 }, 'scale'],
    [{ query: 'Q?', separator: '' }, 'separator'],
    [{ query: 'Q?', min: 5, max: 5 }, 'min'],
    [{ query: 'Q?', prefix: '\\z' }, 'prefix'],
  ])('%o is refused at %s', (address, field) => {
    const faults = fieldFaultsOf(serialTextAddressSchema, address);
    expect(faults.map((fault) => fault.field)).toEqual([field]);
  });
});

it('every field has a title and a help text, for the form', () => {
  for (const schema of [serialTextConfigurationSchema, serialTextAddressSchema]) {
    const { properties = {}, additionalProperties } = z.toJSONSchema(schema, { io: 'input' });
    expect(additionalProperties).toBe(false);
    for (const [name, field] of Object.entries(properties)) {
      const texts = { title: expect.any(String), description: expect.stringMatching(/\.$/) };
      expect([name, field]).toEqual([name, expect.objectContaining(texts)]);
    }
  }
});

it('the channels of every profile that ships are valid', () => {
  for (const { id, channels } of instrumentProfiles) {
    expect(() => configured({ profile: id })).not.toThrow();
    for (const { address } of channels) expect(fieldFaultsOf(serialTextAddressSchema, address)).toEqual([]);
  }
});

describe('the cost of a scan', () => {
  const estimate = (configuration: object, ...addresses: Parameters<typeof textAddress>[0][]) =>
    serialTextAdapter.estimate?.(configured(configuration), addresses.map(textAddress));

  it('is characters times bits over baud rate, for each query once', () => {
    // "Q?" and LF, then 14 characters and LF: 18 characters of 11 bits.
    const one = estimate({ baudRate: 1200, parity: 'even' }, { query: 'Q?' }, { query: 'Q?' });
    expect(one?.requests).toBe(1);
    expect(one?.wireS).toBeCloseTo((18 * 11) / 1200, 9);
    const two = estimate({ baudRate: 1200, parity: 'even' }, { query: 'Q?' }, { query: 'R?' });
    expect(two).toEqual({ requests: 2, wireS: 2 * (one?.wireS ?? NaN) });
  });

  it('counts blocks by their bytes, pauses and checksums, and streams not at all', () => {
    const ten = { baudRate: 10_000 };
    // 2 + 1, then #42048 and 2048 bytes and LF.
    expect(estimate(ten, { query: 'B?', shape: 'block', points: 512 })?.wireS).toBeCloseTo(2.058, 9);
    expect(estimate({ ...ten, rs485: 'automatic', rs485BeforeMs: 5 }, { query: 'Q?' })?.wireS).toBeCloseTo(
      0.023,
      9,
    );
    expect(estimate({ ...ten, commandGapMs: 100 }, { query: 'Q?' })?.wireS).toBeCloseTo(0.103, 9);
    expect(estimate({ ...ten, checksum: 'sum-8' }, { query: 'Q?' })?.wireS).toBeCloseTo(0.022, 9);
    expect(estimate(ten, { stream: '$*' })).toEqual({ requests: 0, wireS: 0 });
    const check = { errorQuery: 'E?', errorCheckScans: 10 };
    expect(estimate({ ...ten, ...check }, { stream: '$*' })?.wireS).toBeCloseTo(0.0018, 9);
  });

  it('names the address that is wrong', () => {
    expect(() => serialTextAdapter.estimate?.(configured({}), [{} as never])).toThrow(
      expect.objectContaining({ code: 'adapter.misconfigured' }),
    );
  });
});
