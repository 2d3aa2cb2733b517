import { describe, expect, it } from 'vitest';
import type { Step } from '@cresthold/shared';
import { newSeekActuator } from '../graph/new-step.js';
import { fieldName, valueAt } from '../graph/parameter-path.js';
import { changeParameter, fieldText, readField } from './read-field.js';
import { endSection } from './seek-sections.js';

const move: Step = {
  kind: 'move',
  id: 'move',
  title: '',
  position: { x: 0, y: 0 },
  parameters: { targets: [{ channel: 'airTrim', value: 40 }], rampS: 5, timeoutS: 60 },
};

describe('what is typed into a field', () => {
  it('is a number, with a comma or a true minus as well', () => {
    expect(readField('number', ' 2,5 ')).toEqual({ isOk: true, value: 2.5 });
    expect(readField('number', '−3')).toEqual({ isOk: true, value: -3 });
    expect(readField('number', 'ten').isOk).toBe(false);
    expect(readField('number', '').isOk).toBe(false);
  });

  it('is an expression where a number may be one', () => {
    expect(readField('numeric', 'survey.best.airTrim')).toEqual({
      isOk: true,
      value: { expression: 'survey.best.airTrim' },
    });
    expect(fieldText({ expression: 'survey.best.airTrim' })).toBe('survey.best.airTrim');
  });

  it('is nothing where it may be left empty', () => {
    expect(readField('optional-number', ' ')).toEqual({ isOk: true, value: null });
    expect(fieldText(null)).toBe('');
  });
});

describe('a change of one parameter', () => {
  it('reaches into lists and leaves the old step as it was', () => {
    const outcome = changeParameter(move, ['targets', 0, 'value'], 41);
    expect(outcome.isOk && valueAt(outcome.step.parameters, ['targets', 0, 'value'])).toBe(41);
    expect(valueAt(move.parameters, ['targets', 0, 'value'])).toBe(40);
    expect(fieldName(['targets', 0, 'value'])).toBe('parameters.targets[0].value');
  });

  it('is refused with the schema’s words', () => {
    const outcome = changeParameter(move, ['timeoutS'], -1);
    expect(outcome.isOk).toBe(false);
    expect(outcome.isOk ? '' : outcome.message).toMatch(/0/);
  });
});

describe('the form of a seek', () => {
  const seek: Step = {
    kind: 'seek',
    id: 'seek',
    title: '',
    position: { x: 0, y: 0 },
    parameters: {
      law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.3, taper: null } },
      actuators: [newSeekActuator('airTrim', { min: 0, max: 50 })],
      constraint: null,
      wideSearch: null,
      end: { afterS: 300, whenConverged: null, when: null },
      invalidForS: 30,
    },
  };
  const names = (step: Step) =>
    step.kind === 'seek' ? endSection(step).map(({ path }) => fieldName(path)) : [];

  it('asks for band and time of convergence only where that may end it', () => {
    expect(names(seek)).not.toContain('parameters.end.whenConverged.band');
    const field = seek.kind === 'seek' ? endSection(seek).find(({ kind }) => kind === 'presence') : undefined;
    const outcome = changeParameter(seek, ['end', 'whenConverged'], field?.whenOn);
    expect(outcome.isOk && names(outcome.step)).toContain('parameters.end.whenConverged.band');
  });
});
