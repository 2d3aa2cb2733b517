import { scenarioSchema, type Scenario } from '@cresthold/shared';
import { burnerEntry } from '../burner/scenario/burner-entry.js';
import { couplingEntry } from '../coupling/scenario/coupling-entry.js';
import type { RigEntryInput } from '../kit/scenario-input.js';
import { matcherEntry } from '../matcher/scenario/matcher-entry.js';
import { mixerEntry } from '../mixer/scenario/mixer-entry.js';
import { pulserEntry } from '../pulser/scenario/pulser-entry.js';
import { stringEntry } from '../string/scenario/string-entry.js';

/** Where the burner bench listens. */
export interface BenchAddress {
  benchHost: string;
  benchPort: number;
}

/** Where further benches are, by name: the port of one on TCP, the path of one on a serial line. */
export type FurtherBenches = Readonly<Record<string, string>>;

type EntryAt = (place: string, host: string) => RigEntryInput;
const overTcp =
  (entry: (place: { host: string; port: number }) => RigEntryInput): EntryAt =>
  (place, host) =>
    entry({ host, port: Number(place) });
const overLine =
  (entry: (place: { path: string }) => RigEntryInput): EntryAt =>
  (place) =>
    entry({ path: place });

/** The rigs that a demonstration can have beside the burner, in the order in which they are shown. */
const furtherRigs: Readonly<Record<string, EntryAt>> = {
  string: overLine(stringEntry),
  coupling: overLine(couplingEntry),
  matcher: overTcp(matcherEntry),
  pulser: overTcp(pulserEntry),
  mixer: overTcp(mixerEntry),
};

/**
 * The Brackwater Test Station, an invented place: people by role, the burner, and what other benches there are.
 *
 * @throws Error for a bench that has no rig
 */
export function demoScenario({ benchHost, benchPort }: BenchAddress, further: FurtherBenches = {}): Scenario {
  const unknown = Object.keys(further).find((name) => !(name in furtherRigs));
  if (unknown !== undefined) throw new Error(`There is no bench "${unknown}" with a rig of its own.`);
  const others = Object.entries(furtherRigs).flatMap(([name, entryAt]) => {
    const place = further[name];
    return place === undefined ? [] : [entryAt(place, benchHost)];
  });
  return scenarioSchema.parse({
    users: [
      { account: 'administrator', title: 'Administrator', roles: ['administrator'] },
      { account: 'officer', title: 'Safety officer', roles: ['safety-officer'] },
      { account: 'engineer', title: 'Test engineer', roles: ['test-engineer'] },
      { account: 'technician', title: 'Technician', roles: ['technician'] },
      { account: 'reader', title: 'Reader', roles: ['reader'] },
    ],
    rigs: [burnerEntry({ host: benchHost, port: benchPort }), ...others],
    start: { rigId: 'burner-1', experimentKey: 'find-air-trim', by: 'engineer' },
  });
}
