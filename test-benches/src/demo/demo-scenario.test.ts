import { execFile } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { scenarioSchema, stepKinds } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { demoScenario } from './demo-scenario.js';

const scenario = demoScenario({ benchHost: '127.0.0.1', benchPort: 15_020 });
const entry = scenario.rigs[0];

describe('the demo scenario', () => {
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

  it('leads every port that needs an edge to a step that is there', () => {
    const graph = entry?.experiments[0]?.content.graph;
    const ids = new Set(graph?.steps.map((step) => step.id));
    for (const step of graph?.steps ?? []) {
      const { ports, optionalPorts } = stepKinds[step.kind];
      const led = graph?.edges.filter((edge) => edge.from === step.id).map((edge) => edge.port);
      expect(led).toEqual(expect.arrayContaining(ports.filter((port) => !optionalPorts.includes(port))));
    }
    for (const edge of graph?.edges ?? []) expect(ids).toContain(edge.to);
  });

  it('is printed as the JSON that the loader reads', async () => {
    const program = fileURLToPath(new URL('../../dist/demo/print-scenario.js', import.meta.url));
    const { stdout } = await promisify(execFile)(process.execPath, [program, '--bench-port', '15020']);
    expect(scenarioSchema.parse(JSON.parse(stdout))).toEqual(scenario);
  });
});
