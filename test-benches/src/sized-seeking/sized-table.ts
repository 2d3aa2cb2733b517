import { seekingLaws, type SeekingLawId } from '@cresthold/shared';
import type { SizedBench } from './sized-bench.js';
import { sizedBenches } from './sized-benches.js';
import { judgeSized, lawIds, notHeld, type SizedVerdict } from './sized-verdict.js';

const seeds = [1, 2, 3, 4, 5, 6];

const opening = `# Laws sized from what was measured

Every seeking law on every bench of the demo, drifting and noisy, with nothing tuned by hand. This page is written by
\`node test-benches/scripts/sized-table.mjs\`; do not edit it by hand.

For each seed the bench is identified through its own noisy readings (a coarse survey, a finer one about its best, a
step of the first actuator), the law is sized from that alone with the loss that its dithers may cost, and it seeks from
three dither amplitudes off the surveyed best along every actuator, for eight of its predicted times of convergence, or
sixty trials where none is predicted. The second half of that is judged by the bench's own truth. Slope seeking is asked
for the slope 0, and the constrained law has no bound within reach: both then go as the gradient does.

_Loss_: mean over the seeds of what the end loses, over the loss allowed to the dithers; noise, drift and what is no
parabola come on top. _Predicted_: the most that the sizing's own prediction makes of it. _Drift_: the part of it that is
trailing a best point that moves as fast as the bench's drift ever does. _Seeds_: how many ended within the prediction.
_Holds_: "yes" where the mean loss is within the mean prediction; "trails" where it is only because the drift is predicted
to cost more than was allowed, which the sizing's remarks say as well; "no" where it is not.
`;

/**
 * @param judge what tries a law on a bench
 * @returns the page, in Markdown
 */
export function sizedTablePage(judge = judgeSized): string {
  return [opening, ...sizedBenches.map((bench) => benchSection(bench, judge))].join('\n');
}

function benchSection(bench: SizedBench, judge: typeof judgeSized): string {
  const rows = lawIds.map((lawId) => lawRow(bench, lawId, judge(bench, lawId, seeds)));
  const reasons = Object.entries(notHeld[bench.title] ?? {}).map(
    ([lawId, reason]) => `${seekingLaws[lawId as SeekingLawId].title} does not hold it: ${reason}.`,
  );
  return [
    `## ${bench.title}, ${bench.actuators.length === 1 ? 'one actuator' : `${bench.actuators.length} actuators`}`,
    '',
    '| law | holds | seeds | loss | predicted | drift |',
    '| --- | --- | ---: | ---: | ---: | ---: |',
    ...rows,
    '',
    ...reasons.flatMap((reason) => [reason, '']),
  ].join('\n');
}

function lawRow(bench: SizedBench, lawId: SeekingLawId, verdict: SizedVerdict): string {
  const share = (loss: number) => (loss / bench.lossAllowed).toFixed(2);
  const cells = [
    seekingLaws[lawId].title,
    holds(bench, verdict),
    `${verdict.within} of ${seeds.length}`,
    share(verdict.endLoss),
    share(verdict.mostLoss),
    lawId === 'perturb-observe' ? '–' : share(verdict.driftLoss),
  ];
  return `| ${cells.join(' | ')} |`;
}

function holds(bench: SizedBench, { endLoss, mostLoss, driftLoss }: SizedVerdict): string {
  if (!(endLoss < mostLoss)) return 'no';
  return driftLoss > bench.lossAllowed && endLoss >= mostLoss - driftLoss ? 'trails' : 'yes';
}
