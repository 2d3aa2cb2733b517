import type { ScanBudget } from '../contract.js';
import { characterTimeS } from '../serial/serial-port.schema.js';
import { bytesOfSample } from './definite-block.js';
import { plainText } from './escaped-text.js';
import { LineCodec } from './line-codec.js';
import type { SerialTextAddress } from './serial-text-address.schema.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import { groupByQuery, type QueryGroup } from './serial-text-plan.js';
import type { TextAddress } from './text-address.js';

/** Characters of a number as instruments write it, with its separator: `+1.234567E+00,`. */
const numberChars = 14;

/**
 * Requests and time on the wire of one read: characters times bits over baud rate, with pauses and direction changes,
 * for a device that answers at once. How long replies are is guessed from their fields and points.
 */
export function estimateScan(
  settings: SerialTextConfiguration,
  addresses: readonly TextAddress[],
): ScanBudget {
  const codec = new LineCodec(settings);
  const groups = groupByQuery(addresses);
  let wireS = groups.reduce((sum, group) => sum + exchangeS(settings, codec, group), 0);
  if (settings.errorQuery !== '' && settings.errorCheckScans > 0) {
    const command = plainText(settings.errorQuery);
    const check: QueryGroup = { command, expectation: { kind: 'line' }, members: [] };
    wireS += exchangeS(settings, codec, check) / settings.errorCheckScans;
  }
  return { requests: groups.length, wireS };
}

function exchangeS(settings: SerialTextConfiguration, codec: LineCodec, group: QueryGroup): number {
  const charS = characterTimeS(settings);
  const sent = codec.encode(group.command);
  const replyChars = Math.max(
    numberChars,
    ...group.members.map(({ address }) => replyCharsOf(address.given)),
  );
  const overhead = plainText(settings.replyTerminator).length + sent.text.length - group.command.length;
  // An echo comes while the command is still being sent; only its end comes after it.
  const echoChars = settings.hasEcho ? 1 : 0;
  const talkS = (sent.wire.length + echoChars + replyChars + overhead) * charS;
  const turnS = (settings.rs485BeforeMs + settings.rs485AfterMs) / 1000;
  // The pause between commands runs while the reply comes in.
  return Math.max(talkS + turnS, settings.commandGapMs / 1000 + sent.wire.length * charS);
}

function replyCharsOf({ shape, points, prefix, suffix, field, sampleType }: SerialTextAddress): number {
  const around = plainText(prefix).length + plainText(suffix).length;
  if (shape === 'block') {
    const bytes = points * bytesOfSample[sampleType];
    return around + 2 + String(bytes).length + bytes;
  }
  return around + (field + points) * numberChars;
}
