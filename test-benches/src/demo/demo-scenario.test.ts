import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { compileExpression, preflight, scenarioSchema } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { efficiencyOf, flueGasAt } from '../burner/burner-physics.js';
import { demoScenario } from './demo-scenario.js';

const scenario = demoScenario({ benchHost: '127.0.0.1', benchPort: 15_020 });
const entry = scenario.rigs[0];

describe('the demo scenario', { timeout: 30_000 }, () => {
  it('has one account for each role', () => {
    expect(scenario.users.flatMap((user) => user.roles).sort()).toEqual(
      ['administrator', 'reader', 'safety-officer', 'technician', 'test-engineer'].sort(),
    );
  });

  it('limits every actuator but the heartbeat, which belongs to the host', () => {
    const limited = entry?.envelope.content.limits.map((limit) => limit.channel);
    const actuators = entry?.rig.channels.filter((channel) => channel.kind === 'actuator');
    expect(actuators?.map((actuator) => actuator.id)).toEqual([...(limited ?? []), 'heartbeat']);
    expect(entry?.envelope.content.heartbeat?.channel).toBe('heartbeat');
  });

  it('passes preflight, which finds nothing to remark', () => {
    const { rig, envelope, objectives, experiments } = scenario.rigs[0]!;
    const faults = preflight({
      rig,
      envelope: envelope.content,
      objective: objectives[0]?.content ?? null,
      graph: experiments[0]!.content.graph,
      grids: new Map([['airTrim', { step: 0.01, origin: 0 }]]),
    });
    expect(faults).toEqual([]);
  });

  it('computes from the readings the efficiency that the bench means', () => {
    for (const trimPct of [14, 20, 60]) {
      const gas = flueGasAt(trimPct, 1.1);
      const values = new Map([
        ['o2', gas.o2Pct],
        ['co', gas.coPpm],
        ['flueTemp', gas.flueTempC],
        ['airTemp', 20],
      ]);
      for (const channel of scenario.rigs[0]?.rig.channels ?? []) {
        if (channel.kind !== 'derived') continue;
        const outcome = compileExpression(channel.expression, new Set(values.keys()));
        if (!outcome.isOk) throw new Error(outcome.message);
        values.set(
          channel.id,
          outcome.expression.evaluate((name) => values.get(name) ?? NaN),
        );
      }
      expect(values.get('efficiency')).toBeCloseTo(efficiencyOf(gas), 3);
    }
  });

  it('is printed as the JSON that the loader reads', async () => {
    const program = fileURLToPath(new URL('../../dist/demo/print-scenario.js', import.meta.url));
    const { stdout } = await promisify(execFile)(process.execPath, [program, '--bench-port', '15020']);
    expect(scenarioSchema.parse(JSON.parse(stdout))).toEqual(scenario);
  });
});
