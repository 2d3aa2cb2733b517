import type { ExperimentContent } from './experiment.schema.js';

type Fields = Record<string, unknown>;

/**
 * Brings an experiment that was stored by an earlier release into the form of today; one that has it already comes
 * back as it is. Earlier: Survey and Seek had one actuator with fields of their own, and Seek the gradient law only.
 *
 * @param stored content of a version, as it was written
 */
export function migrateExperiment(stored: ExperimentContent): ExperimentContent;
export function migrateExperiment(stored: unknown): unknown;
export function migrateExperiment(stored: unknown): unknown {
  if (!isFields(stored) || !isFields(stored['graph']) || !Array.isArray(stored['graph']['steps']))
    return stored;
  const steps: unknown[] = stored['graph']['steps'];
  const migrated = steps.map(migrateStep);
  if (migrated.every((step, i) => step === steps[i])) return stored;
  return { ...stored, graph: { ...stored['graph'], steps: migrated } };
}

function migrateStep(step: unknown): unknown {
  if (!isFields(step) || !isFields(step['parameters'])) return step;
  const { parameters } = step;
  if (typeof parameters['actuator'] !== 'string') return step;
  if (step['kind'] === 'survey') return { ...step, parameters: surveyOf(parameters) };
  return step['kind'] === 'seek' ? { ...step, parameters: seekOf(parameters) } : step;
}

function surveyOf(old: Fields): Fields {
  const { actuator: channel, from, to, points, isUpAndDown, ...rest } = old;
  return { actuators: [{ channel, from, to, points, isUpAndDown }], ...rest, choose: 'highest' };
}

function seekOf(old: Fields): Fields {
  const { actuator: channel, ditherAmplitude, ditherPeriodS, washoutRatio, lowPassRatio, ...more } = old;
  const { gain, phaseDeg, min, max, end, invalidForS } = more;
  const actuator = {
    ...{ channel, min, max, amplitude: ditherAmplitude, periodS: ditherPeriodS, phaseDeg, dither: 'sine' },
    ...{ measuredChannel: null, gain, speedMax: null, own: {} },
  };
  return {
    law: { id: 'gradient', parameters: { washoutRatio, lowPassRatio, taper: null } },
    actuators: [actuator],
    constraint: null,
    wideSearch: null,
    end,
    invalidForS,
  };
}

function isFields(value: unknown): value is Fields {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}
