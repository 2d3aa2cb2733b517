import { describe, expect, it } from 'vitest';
import { parseBenchCommand, resultLine } from './bench-command.js';
import type { Benchmark } from './benchmark.types.js';

const benchmark = (name: string): Benchmark => ({
  name,
  purpose: '',
  run: () => Promise.reject(new Error('not run here')),
});
const known = [benchmark('one'), benchmark('two')];

describe('the benchmark command', () => {
  it('runs what is named, once, in that order', () => {
    const command = parseBenchCommand(['two', 'one', 'two', '--json'], known);
    expect(command).toMatchObject({ kind: 'run', isJson: true, chosen: [{ name: 'two' }, { name: 'one' }] });
  });

  it('runs a group by its name', () => {
    const group = [...known, benchmark('many/a'), benchmark('many/b')];
    const command = parseBenchCommand(['many', 'many/b', 'one'], group);
    expect(command).toMatchObject({ chosen: [{ name: 'many/a' }, { name: 'many/b' }, { name: 'one' }] });
    expect(parseBenchCommand(['man'], group).kind).toBe('refused');
  });

  it('runs all of them on demand', () => {
    expect(parseBenchCommand(['all'], known)).toMatchObject({ isJson: false, chosen: known });
  });

  it.each([
    [['three'], '"three"'],
    [[], 'Name at least one'],
    [['one', '--loud'], '--loud'],
  ])('refuses %j and says why', (args, why) => {
    const command = parseBenchCommand(args, known);
    expect(command.kind).toBe('refused');
    expect(command).toMatchObject({ message: expect.stringContaining(why) });
  });

  it('prints a result for people on one line', () => {
    const line = resultLine({ name: 'one', value: 12345.6, unit: 'scans/s', ratio: 0.8123, against: 'x' });
    expect(line).toMatch(/^one +12,346 scans\/s +0\.81 × x$/);
    const law = { name: 'law', value: 40, unit: 'ns', ratio: 2, against: 'x', heapGrowthBytes: 2048 };
    expect(resultLine(law)).toMatch(/^law +40\.0 ns +2\.00 × x; heap 2 KiB in 10 million$/);
  });
});
