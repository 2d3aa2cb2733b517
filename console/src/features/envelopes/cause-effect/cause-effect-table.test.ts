import { expect, it } from 'vitest';
import { demoEnvelope, demoRig } from '../../../testing/documents.js';
import { causeEffectTable } from './cause-effect-table.js';

const { content } = demoEnvelope;
const [lock] = content.interlocks;
const rowOf = (cause: string, change: object = {}) =>
  causeEffectTable({ ...content, ...change }, demoRig).rows.find((row) => row.cause === cause);

it('says what a trip does to each actuator: category, order, and where it rests', () => {
  expect(rowOf('Carbon monoxide high')).toMatchObject({
    when: 'co > 400 for 2 s, or an input that is not good',
    action: 'trip',
    latches: 'until reset',
    effects: ['category 1, order 0: ramped to rest, released at 10 %'],
  });
});

it('says that a warning moves nothing and a pause holds', () => {
  const locks = ['warn', 'pause'].map((action) => ({ ...lock, title: action, action, isLatching: true }));
  expect(rowOf('warn', { interlocks: locks })?.effects).toEqual(['nothing; said to the technician']);
  expect(rowOf('pause', { interlocks: locks })?.effects).toEqual(['the run pauses; held where it is']);
  expect(rowOf('pause', { interlocks: locks })?.latches).toBe('until acknowledged');
});

it('has a row for every cause: stops, inputs, interlocks, watches and the heartbeat', () => {
  const { rows, actuators } = causeEffectTable(
    {
      ...content,
      limits: content.limits.flatMap((first) => [
        first,
        { ...first, channel: 'co', stopCategory: 0 as const, stopOrder: 2 },
      ]),
      emergencyStopInputs: [{ channel: 'o2', title: 'Stop at the door', pressedWhen: 'zero' }],
      heartbeat: { channel: 'airTrim', periodS: 0.5 },
    },
    demoRig,
  );
  expect(actuators.map(({ title }) => title)).toEqual(['Air trim', 'Carbon monoxide']);
  expect(rows.map(({ cause }) => cause)).toEqual([
    'Emergency stop of this software',
    'Stop at the door',
    'Carbon monoxide high',
    'Oxygen in flue gas is stale',
    'Air trim does not follow',
    'Carbon monoxide does not follow',
    'Late scans',
    'Server silent',
    'Connection lost',
    'Heartbeat stands still',
  ]);
  expect(rows.every(({ effects }) => effects.length === 2)).toBe(true);
  expect(rows[1]?.effects[1]).toBe('category 0, order 2: to rest at once, released at 10 ppm');
});
