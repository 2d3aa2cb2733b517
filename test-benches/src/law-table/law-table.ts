import { tableLaws } from './table-laws.js';
import { tablePlants, type TablePlant } from './table-plants.js';
import { triedForS, tryLaw, type Trial } from './try-law.js';

/** Seeds of the noise; one is enough where there is none. */
const noiseSeeds = [1, 2, 3, 4, 5];

/** The table of every law on every plant as a Markdown page. */
export function lawTablePage(): string {
  return [...introduction(), ...tablePlants.flatMap(plantSection)].join('\n') + '\n';
}

function plantSection(plant: TablePlant): string[] {
  const rows = tableLaws.map((entry) => {
    const seeds = plant.noise > 0 ? noiseSeeds : [1];
    return row(
      entry.title,
      plant,
      seeds.map((seed) => tryLaw(entry, plant, seed)),
    );
  });
  return [
    '',
    `## ${plant.title}`,
    '',
    '| law | converged | after | final loss | ripple loss | worst excursion |',
    '| --- | --- | ---: | ---: | ---: | ---: |',
    ...rows,
  ];
}

function row(title: string, plant: TablePlant, trials: Trial[]): string {
  const converged = trials.filter(({ isConverged }) => isConverged);
  const many = trials.length > 1 ? ` (${converged.length} of ${trials.length})` : '';
  const verdict = converged.length === trials.length ? 'yes' : 'no';
  const mean = (of: (trial: Trial) => number, among = trials) =>
    among.reduce((sum, trial) => sum + of(trial), 0) / among.length;
  const after = converged.length > 0 ? `${mean((t) => t.convergedAfterS, converged).toFixed(0)} s` : '–';
  const invalidShare = mean((t) => t.invalidShare);
  const invalid = invalidShare > 0 ? `, ${(100 * invalidShare).toFixed(1)} % of the time not valid` : '';
  // At a cliff there is no peak whose curvature would give a ripple loss.
  const ripple = plant.id === 'cliff' ? '–' : mean((t) => t.rippleLoss).toFixed(4);
  const worst = Math.max(...trials.map((t) => t.worstExcursion));
  const cells = [
    title,
    verdict + many,
    after,
    mean((t) => t.finalLoss).toFixed(4),
    ripple,
    worst.toFixed(2) + invalid,
  ];
  return `| ${cells.join(' | ')} |`;
}

function introduction(): string[] {
  return [
    '# Seeking laws compared',
    '',
    'Every seeking law on eight plants, each run of the real code in virtual time. This page is written by',
    '`node test-benches/scripts/law-table.mjs`; do not edit it by hand. What the laws do on the benches, sized from what',
    'was measured, and which do not hold one: [sized-seeking.md](sized-seeking.md).',
    '',
    'One rule gives all parameters; nothing is tuned to a plant or a law. Dither amplitude 0.1 (half of peak to peak),',
    'dither period 2 s, scan 0.05 s; the gain that makes a rate of convergence of 0.05 1/s (simultaneous perturbation:',
    '0.1 1/s) on the curvature at the peak, which a survey would give; demodulation phase from the known lag. The',
    'estimate moves at 0.1 a second at most, with Newton’s and the constrained law at their own limit of one amplitude',
    `a period, 0.05; perturb-and-observe takes one step a second. Each law seeks for ${triedForS} s.`,
    '',
    '*Converged*: the estimate stayed within three dither amplitudes of the best point for the last minute at least;',
    '*after*: the time it last came in. *Final loss*: mean of the true objective below its best over the last minute,',
    'valid scans only. *Ripple loss*: what the dither alone costs at the peak in theory: Σ f″a²/4 for a sine and for',
    'the three points of perturb-and-observe, twice that for a square and for simultaneous perturbation. *Worst',
    'excursion*: largest distance of what was asked for from the best point after convergence, or at all where there',
    'was none. With noise: five seeds.',
    '',
    'How to read the failures. *Two hills*: every law ends on the hill it starts on; only a survey finds the other.',
    '*Ridge*: a first-order law creeps along it at a hundredth of its rate; Newton’s goes at one rate in every',
    'direction. *Noise*: perturb-and-observe decides on two noisy means and walks at random where the slope is small.',
    '*Cliff*: every law but the constrained one looks over the edge, retreats and comes again; what is lost is the',
    'distance it keeps by that. The constrained law stays on the safe side by the reserve it was given.',
  ];
}
