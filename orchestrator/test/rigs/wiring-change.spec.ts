import { changesMeaning } from '@cresthold/shared';
import { testRig } from '../rig-host/test-rig.js';

describe('a change of wiring', () => {
  it('gives channels another meaning where a machine becomes a bench, on which faults can be injected', () => {
    const machine = testRig(1);
    expect(changesMeaning(machine, { ...machine, isBench: true })).toBe(true);
    expect(changesMeaning({ ...machine, isBench: true }, machine)).toBe(true);
    expect(changesMeaning(machine, { ...machine, title: 'Another title' })).toBe(false);
  });
});
