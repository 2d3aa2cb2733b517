import { closestNames } from '../../expressions/closest-names.js';
import { compileObjective } from '../../objectives/objective-evaluator.js';
import type { Channel } from '../../rigs/rig.schema.js';
import type { Step } from '../experiment.schema.js';
import { ditherOf } from '../seek/seek-fields.js';
import { commandedActuators } from '../step-parameters.js';
import type { PreflightCase } from './fault-list.js';

/** Channels that steps name, and the objective that they need. */
export function checkChannels(c: PreflightCase): void {
  if (!c.envelope) {
    const message = 'No approved envelope is in force for this rig: have one approved first.';
    c.faults.error('no-envelope', null, null, message);
  }
  checkObjective(c);
  for (const step of c.graph.steps) {
    checkActuators(c, step);
    checkSensor(c, step);
    checkMeasured(c, step);
    if (!c.objective && (step.kind === 'survey' || step.kind === 'seek')) {
      c.faults.error(
        'no-objective',
        step.id,
        null,
        'This step needs an objective: choose one for the experiment.',
      );
    }
  }
}

function checkObjective({ objective, rig, faults }: PreflightCase): void {
  if (!objective) return;
  const outcome = compileObjective(objective, rig);
  if (outcome.isOk) return;
  for (const { field, message } of outcome.faults) {
    faults.error('objective', null, `objective.${field}`, `The objective "${objective.title}": ${message}`);
  }
}

function findChannel(c: PreflightCase, step: Step, field: string, id: string): Channel | null {
  const channel = c.rig.channels.find((candidate) => candidate.id === id);
  if (channel) return channel;
  const meant = closestNames(
    id,
    c.rig.channels.map((candidate) => candidate.id),
  );
  const hint = meant.length > 0 ? `did you mean ${meant.join(' or ')}?` : 'choose one of its channels.';
  c.faults.error('unknown-channel', step.id, field, `The rig has no channel "${id}": ${hint}`);
  return null;
}

function checkActuators(c: PreflightCase, step: Step): void {
  const seen = new Set<string>();
  for (const { field, channel: id } of commandedActuators(step)) {
    if (seen.has(id)) {
      c.faults.error('duplicate-target', step.id, field, `"${id}" has two targets in this step: keep one.`);
    }
    seen.add(id);
    const channel = findChannel(c, step, field, id);
    if (!channel) continue;
    if (channel.kind !== 'actuator') {
      c.faults.error('no-actuator', step.id, field, `"${id}" is a ${channel.kind}: choose an actuator.`);
    } else if (c.envelope?.heartbeat?.channel === id) {
      const message = `"${id}" is the heartbeat and belongs to the rig host: choose another actuator.`;
      c.faults.error('heartbeat-commanded', step.id, field, message);
    } else if (c.envelope && !c.envelope.limits.some((limit) => limit.channel === id)) {
      const message = `"${id}" has no limit in the envelope in force: have one approved, or choose another.`;
      c.faults.error('no-limit', step.id, field, message);
    }
  }
}

function checkSensor(c: PreflightCase, step: Step): void {
  if (step.kind !== 'settle') return;
  const field = 'parameters.channel';
  const channel = findChannel(c, step, field, step.parameters.channel);
  if (channel?.kind === 'actuator') {
    const message = `"${channel.id}" is an actuator: choose a sensor or a derived channel to wait for.`;
    c.faults.error('no-sensor', step.id, field, message);
  } else if (channel?.kind === 'trace') {
    const message = `"${channel.id}" is a trace: make a derived channel of it, as in mean(${channel.id}), and wait for that.`;
    c.faults.error('no-sensor', step.id, field, message);
  }
}

/** Channels on which a Seek measures the plant's own ripple. */
function checkMeasured(c: PreflightCase, step: Step): void {
  if (step.kind !== 'seek') return;
  const { law, actuators } = step.parameters;
  actuators.forEach((actuator, index) => {
    if (ditherOf(law.id, actuator) !== 'measured') return;
    const field = `parameters.actuators[${index}].measuredChannel`;
    if (actuator.measuredChannel !== null) {
      findChannel(c, step, field, actuator.measuredChannel);
      return;
    }
    const message = `Choose the channel on which the ripple of "${actuator.channel}" is measured.`;
    c.faults.error('no-measured-channel', step.id, field, message);
  });
}
