import { damperRatePctPerS, safeTrim, watchdogS } from './bench-facts.js';
import { KillStation, speed, type Loss } from './kill-station.js';

/** What the measurement itself may add, s of bench time: the bench logs its truth every 0.2 s of it. */
const measuringS = 0.8;
/** Longest stretch of samples that may be lost, ms. */
const missingMaxMs = 100;

/** The longest time to safe, s of bench time: its own watchdog, then the way there at the slower of two rates. */
function safeBoundS(fromTrim: number, slewPerS: number): number {
  const slowestPctPerS = Math.min(slewPerS / speed, damperRatePctPerS);
  return watchdogS + Math.abs(safeTrim - fromTrim) / slowestPctPerS + measuringS;
}

/** The losses that no test group can rule out, each in mid-seek, each `rounds` times. */
export function describeKills(rounds: number): void {
  describe(`a loss in mid-seek, ${rounds} times each`, () => {
    let kills: KillStation;
    const losses: Loss[] = [];

    beforeAll(async () => {
      kills = await KillStation.open();
    }, 60_000);

    afterAll(async () => {
      printTable(losses, kills?.disturbed ?? 0);
      await kills?.close();
    }, 60_000);

    const suffer = async (what: string, event: () => void, mend: () => Promise<void>) => {
      for (let round = 1; round <= rounds; round++) {
        const loss = await kills.lose(what, round, event, mend);
        losses.push(loss);
        judge(loss, kills.station.entry.envelope.content.limits[0]?.slewPerS ?? NaN);
      }
      return losses.filter((loss) => loss.what === what);
    };
    const timeoutMs = 60_000 * rounds;

    it(
      'kill -9 of the server',
      async () => {
        const event = () => void kills.station.server.child.kill('SIGKILL');
        const all = await suffer('server', event, () => kills.restartServer());
        for (const loss of all) {
          expect(loss.tripCause).toBe('server-silent');
          expect(['tripped', 'interrupted']).toContain(loss.runStatus);
        }
      },
      timeoutMs,
    );

    it(
      'kill -9 of the rig host',
      async () => {
        const all = await suffer(
          'rig host',
          () => process.kill(kills.hostPid(), 'SIGKILL'),
          async () => {},
        );
        for (const loss of all) {
          expect(loss).toMatchObject({ tripCause: 'host-lost', runStatus: 'interrupted' });
        }
      },
      timeoutMs,
    );

    it.each([
      ['wire silent', 'freeze'],
      ['wire closed', 'cut'],
    ] as const)(
      'a cut of the wire: %s',
      async (what, how) => {
        const all = await suffer(
          what,
          () => kills.wire[how](),
          () => Promise.resolve(kills.wire.restore()),
        );
        for (const loss of all) expect(loss.runStatus).toBe('tripped');
      },
      timeoutMs,
    );
  });
}

function judge(loss: Loss, slewPerS: number): void {
  expect(loss.safeAfterBenchS).toBeLessThanOrEqual(safeBoundS(loss.fromTrim, slewPerS));
  expect(loss.missingMs).toBeLessThanOrEqual(missingMaxMs);
  expect(loss).toMatchObject({ isFileIntact: true, writesOutside: 0 });
}

function printTable(losses: readonly Loss[], disturbed: number): void {
  const lines = losses.map((loss) =>
    [
      loss.what.padEnd(12),
      String(loss.round).padStart(5),
      loss.fromTrim.toFixed(1).padStart(8),
      String(loss.safeAfterMs).padStart(10),
      loss.safeAfterBenchS.toFixed(2).padStart(8),
      String(loss.missingMs).padStart(10),
      String(loss.longestGapMs).padStart(9),
      String(loss.scans).padStart(6),
      loss.runStatus.padEnd(12),
      loss.tripCause.padEnd(16),
      String(loss.writesOutside).padStart(7),
    ].join(' '),
  );
  const head =
    'loss         round   from/% to safe/ms  bench/s missing/ms   gap/ms  scans run          trip             outside';
  const note = `${disturbed} more runs tripped before the event: the machine held the rig host up.`;
  console.log([head, ...lines, note].join('\n'));
}
