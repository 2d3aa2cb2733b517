import { describe, expect, it } from 'vitest';
import {
  experimentGraphSchema,
  lawFields,
  preflight,
  seekingLawIds,
  stepSchema,
  type StepOf,
} from '@cresthold/shared';
import { newSeekActuator } from '../graph/new-step.js';
import { fieldName, valueAt } from '../graph/parameter-path.js';
import { canPlanDithers, fitted, withLaw, withPlannedDithers } from '../graph/seek-edits.js';
import { demoRig } from '../../../testing/documents.js';
import { changeParameter } from './read-field.js';
import {
  actuatorSection,
  constraintSection,
  endSection,
  lawSection,
  wideSearchSection,
} from './seek-sections.js';

type Seek = StepOf<'seek'>;

const range = { min: 0, max: 50 };
const seek: Seek = {
  kind: 'seek',
  id: 'seek',
  title: '',
  position: { x: 0, y: 0 },
  parameters: {
    law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.4, taper: null } },
    actuators: [newSeekActuator('airTrim', range)],
    constraint: null,
    wideSearch: null,
    end: { afterS: 300, whenConverged: null, when: null },
    invalidForS: 30,
  },
};
const sectionsOf = (step: Seek) => [
  ...lawSection(step),
  ...step.parameters.actuators.flatMap((_, i) => actuatorSection(step, i)),
  ...constraintSection(step),
  ...wideSearchSection(step),
  ...endSection(step),
];
const two = (step: Seek): Seek => ({
  ...step,
  parameters: {
    ...step.parameters,
    actuators: [
      ...step.parameters.actuators,
      fitted(newSeekActuator('fuelTrim', range), step.parameters.law.id),
    ],
  },
});

describe.each(seekingLawIds)('a seek by the law "%s"', (id) => {
  const chosen = withLaw(seek, id);

  it('is one that the schema takes, and preflight misses nothing of the law', () => {
    expect(stepSchema.parse(chosen)).toEqual(chosen);
    const graph = experimentGraphSchema.parse({ steps: [chosen], edges: [] });
    const faults = preflight({ graph, objective: null, rig: demoRig, envelope: null });
    expect(faults.filter(({ code }) => code.startsWith('preflight.law'))).toEqual([]);
  });

  it('has a form that reaches every parameter that the law uses, in the words of its schema', () => {
    const fields = sectionsOf(chosen);
    for (const { path, kind } of fields) {
      if (kind !== 'presence') expect(valueAt(chosen.parameters, path), fieldName(path)).not.toBeUndefined();
    }
    const labels = fields.map(({ label }) => label);
    for (const { name, type } of lawFields(id)) {
      if (type === 'list') continue;
      expect(fields.some(({ path }) => fieldName(path).startsWith(`parameters.law.parameters.${name}`))).toBe(
        true,
      );
    }
    expect(labels).toContain('Dither amplitude');
    expect(new Set(fields.map(({ path }) => fieldName(path))).size).toBe(fields.length);
  });

  it('keeps what both laws have when it is changed for another and back', () => {
    const back = withLaw(chosen, 'gradient');
    expect(back.parameters.actuators[0]).toMatchObject({
      channel: 'airTrim',
      amplitude: 1,
      periodS: 5,
      gain: 1,
    });
    expect(back.parameters.constraint).toBeNull();
  });
});

describe('parts that may be added to any law', () => {
  it('open with their presence: taper and wide search', () => {
    const taper = lawSection(seek).find(({ label }) => label === 'Taper');
    const tapered = changeParameter(seek, taper?.path ?? [], taper?.whenOn);
    const step = tapered.isOk ? (tapered.step as Seek) : seek;
    expect(lawSection(step).map(({ label }) => label)).toContain('Floor');
    const [wide] = wideSearchSection(step);
    const searching = changeParameter(step, wide?.path ?? [], wide?.whenOn);
    if (!searching.isOk) throw new Error(searching.message);
    expect(wideSearchSection(searching.step as Seek).map(({ label }) => label)).toContain(
      'Points for each actuator',
    );
  });

  it('ask for the channel of a measured ripple only where one is used', () => {
    const labels = (step: Seek) => actuatorSection(step, 0).map(({ label }) => label);
    expect(labels(seek)).not.toContain('Ripple measured on');
    const measured = changeParameter(seek, ['actuators', 0, 'dither'], 'measured');
    expect(measured.isOk && labels(measured.step as Seek)).toContain('Ripple measured on');
    expect(actuatorSection(withLaw(seek, 'spsa'), 0).map(({ label }) => label)).not.toContain('Dither');
  });
});

describe('planning the dithers', () => {
  it('is offered where several dither, and gives periods that preflight has nothing against', () => {
    expect(canPlanDithers(seek)).toBe(false);
    expect(canPlanDithers(withLaw(two(seek), 'spsa'))).toBe(false);
    for (const id of ['gradient', 'newton', 'bounded-rate'] as const) {
      const step = two(withLaw(seek, id));
      expect(canPlanDithers(step)).toBe(true);
      const judge = (one: Seek) =>
        preflight({
          graph: experimentGraphSchema.parse({ steps: [one], edges: [] }),
          ...{ objective: null, rig: demoRig, envelope: null },
        }).filter(({ code }) => code.startsWith('preflight.dithers'));
      expect(judge(step).length).toBeGreaterThan(0);
      const planned = withPlannedDithers(step, 0.05);
      if (!planned.isOk) throw new Error(planned.message);
      expect(judge(planned.step)).toEqual([]);
      expect(planned.step.parameters.actuators[0]?.periodS).toBe(5);
    }
  });

  it('says why where there is no plan', () => {
    const slow = two({
      ...seek,
      parameters: { ...seek.parameters, actuators: [{ ...newSeekActuator('airTrim', range), periodS: 0.5 }] },
    });
    const fast = {
      ...slow,
      parameters: {
        ...slow.parameters,
        actuators: slow.parameters.actuators.map((a) => ({ ...a, periodS: 0.5 })),
      },
    };
    expect(withPlannedDithers(fast, 0.05)).toMatchObject({
      isOk: false,
      message: expect.stringContaining('No dither plan'),
    });
  });
});
