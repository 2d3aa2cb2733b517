import type { ProbeOutcome, ReadOutcome } from '../contract.js';
import { showText } from './escaped-text.js';
import type { SerialTextReadPlan } from './serial-text-plan.js';
import type { TextLink } from './text-link.js';

/** Reads the one address of a plan and tells what went over the wire, line by line. */
export async function probeAddress(
  link: TextLink,
  plan: SerialTextReadPlan,
  deadlineMs: number,
  read: () => Promise<ReadOutcome>,
): Promise<ProbeOutcome> {
  const [address] = plan.addresses;
  const stream = address?.given.stream ?? '';
  const lines: string[] = [];
  link.onTraffic = (direction, text) => lines.push(`${direction}: ${showText(text, 500)}`);
  try {
    // A person who tries a stream waits for its next line; a scan would not.
    if (stream !== '' && !link.board.latest(stream)) await awaitLine(link, stream, deadlineMs);
    const { values, faults, traces, lost } = await read();
    const latest = stream === '' ? null : link.board.latest(stream);
    if (latest) lines.push(`received: ${showText(latest.text, 500)}`);
    const fault = lost ?? faults[0] ?? null;
    const trace = fault ? null : (traces?.[0] ?? null);
    return { raw: lines.join('\n'), value: values[0] ?? NaN, trace: trace && trace.slice(), fault };
  } finally {
    link.onTraffic = null;
  }
}

async function awaitLine(link: TextLink, stream: string, deadlineMs: number): Promise<void> {
  while (!link.board.latest(stream) && !link.lost) {
    if (!(await link.awaitStream(deadlineMs))) return;
  }
}
