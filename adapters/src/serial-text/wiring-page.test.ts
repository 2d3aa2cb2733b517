import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import type { AdapterSession } from '../contract.js';
import { plainText, unescapeText } from './escaped-text.js';
import type { SerialTextAddress, SerialTextAddressInput } from './serial-text-address.schema.js';
import { serialTextConfigurationSchema } from './serial-text-configuration.schema.js';
import { openText, patient, textAddress } from './testing/open-text.js';
import { ScriptedInstrument } from './testing/scripted-instrument.js';

const page = readFileSync(
  fileURLToPath(new URL('../../../docs/wiring-serial-text.md', import.meta.url)),
  'utf8',
);

interface Example {
  title: string;
  connection: object;
  channels: Record<string, SerialTextAddressInput>;
  dialogue: string[];
  result: string[];
}

function block(section: string, kind: string): string | null {
  return new RegExp(`^\`\`\`\\w+ ${kind}\\n([\\s\\S]*?)^\`\`\`$`, 'm').exec(section)?.[1] ?? null;
}

/** The sections of the page that show a connection, its channels, what goes over the wire and what comes of it. */
function examplesOf(text: string): Example[] {
  return text.split(/^## /m).flatMap((section) => {
    const [connection, channels] = [block(section, 'connection'), block(section, 'channels')];
    if (connection === null || channels === null) return [];
    return {
      title: section.split('\n')[0] ?? '',
      connection: JSON.parse(connection) as object,
      channels: JSON.parse(channels) as Example['channels'],
      dialogue: (block(section, 'dialogue') ?? '').trim().split('\n'),
      result: (block(section, 'result') ?? '').trim().split('\n'),
    };
  });
}

/** What each line of a dialogue says: the command, null where the device speaks by itself, and the reply or null. */
function turnsOf(dialogue: readonly string[]): { command: string | null; reply: string | null }[] {
  return dialogue.map((line) => {
    const [asked = '', reply] = line.split('←').map((part) => part.trim());
    const command = asked.startsWith('→') ? plainText(asked.slice(1).trim()) : null;
    return { command, reply: reply === undefined ? null : (unescapeText(reply) ?? '') };
  });
}

/** Plays the instrument: each command must be one of those shown, and the shown ones come in their order. */
function instrumentOf(example: Example): { instrument: ScriptedInstrument; unknown: string[] } {
  const { requestTerminator, replyTerminator } = serialTextConfigurationSchema.parse(example.connection);
  const turns = turnsOf(example.dialogue);
  const unknown: string[] = [];
  const instrument = new ScriptedInstrument((command) => {
    const at = turns.findIndex((turn) => turn.command === command);
    if (at < 0) unknown.push(command);
    const [turn] = at < 0 ? [] : turns.splice(at, 1);
    const reply = turn?.reply ?? null;
    return reply === null ? null : reply + plainText(replyTerminator);
  }, plainText(requestTerminator));
  return { instrument, unknown };
}

/** Lines of a result in groups that go in one call: each write by itself, reads that follow one another together. */
function callsOf(result: readonly string[]): string[][] {
  const calls: string[][] = [];
  for (const line of result) {
    const last = calls.at(-1);
    const goesOn = last && !line.startsWith('write') && !last[0]?.startsWith('write');
    if (goesOn) last.push(line);
    else calls.push([line]);
  }
  return calls;
}

async function writeOf(
  session: AdapterSession<SerialTextAddress>,
  line: string,
  channels: Example['channels'],
) {
  const [, name = '', value = '', due = ''] = /^write (\w+) (\S+): (.*)$/.exec(line) ?? [];
  const { faults } = await session.write([textAddress(channels[name] ?? {})], [Number(value)]);
  const outcome = faults[0] ? `${faults[0].code}, ${faults[0].message}` : 'taken';
  const [code = '', text = ''] = due.split(/, (.*)/);
  return [outcome.startsWith(code) && outcome.includes(text) ? line : outcome];
}

async function readsOf(
  session: AdapterSession<SerialTextAddress>,
  lines: string[],
  channels: Example['channels'],
) {
  const addresses = lines.map((line) => textAddress(channels[line.split(' ')[0] ?? ''] ?? {}));
  const { values, faults, traces } = await session.read(session.planRead(addresses));
  return lines.map((line, index) => {
    const [name = '', due = ''] = line.split(' = ');
    const value = values[index] ?? NaN;
    const fault = faults[index]?.message;
    const trace = traces?.[index];
    if (
      fault === undefined &&
      (due === 'no value' ? Number.isNaN(value) : Math.abs(Number(due) - value) < 1e-9)
    ) {
      return line;
    }
    return `${name} = ${fault ?? (trace ? [...trace].join(' ') : value)}`;
  });
}

const examples = examplesOf(page);

describe('the examples of docs/wiring-serial-text.md', () => {
  it('are all there', () => {
    expect(examples).toHaveLength(6);
  });

  it.each(examples.map((example) => [example.title, example] as const))('%s', async (_title, example) => {
    const { instrument, unknown } = instrumentOf(example);
    const session = await openText(instrument.path, { ...example.connection, path: instrument.path });
    const said = turnsOf(example.dialogue).filter(({ command }) => command === null);
    const streams = Object.values(example.channels).filter(({ stream }) => stream);
    session.planRead(streams.map(textAddress));
    for (const { reply } of said) instrument.send(`${reply}\r\n`);
    for (const lines of callsOf(example.result)) {
      const call = lines[0]?.startsWith('write')
        ? () => writeOf(session, lines[0] ?? '', example.channels)
        : () => readsOf(session, lines, example.channels);
      // Lines that a device sends by itself take a moment to come; everything else is said once.
      if (said.length > 0) await expect.poll(call, patient).toEqual(lines);
      else expect(await call()).toEqual(lines);
    }
    expect(unknown).toEqual([]);
    await session.close();
    await instrument.stop();
  });
});
