import type { RunEventBody } from '@cresthold/shared';
import { plainNumber } from '../../components/index.js';

/** A number of an event, or what stands for none. */
const shown = (value: number | null): string => (value === null ? 'no number' : plainNumber(value));

const met = (isMet: boolean | null): string =>
  isMet === null ? 'could not be judged' : isMet ? 'is met' : 'is not met';

/** What happened, as a technician would say it. */
export function eventText(body: RunEventBody): string {
  switch (body.type) {
    case 'run.started':
      return `Run started by ${body.by}`;
    case 'run.paused':
      return `Paused: ${body.reason}`;
    case 'run.resumed':
      return `Resumed by ${body.by}`;
    case 'run.stopping':
      return `Stopping: ${body.reason}`;
    case 'run.ended':
      return `Run ended, ${body.status}, verdict ${body.verdict}: ${body.reason}`;
    case 'step.started':
      return `${body.step} began`;
    case 'step.ended':
      return `${body.step} left by ${body.port}${body.reason === undefined ? '' : `: ${body.reason}`}`;
    case 'survey.point-measured':
      return `${body.step}, ${body.branch}: objective ${shown(body.objective)} at ${body.actuator} ${plainNumber(body.value)}${body.second ? `, ${body.second.actuator} ${plainNumber(body.second.value)}` : ''}${body.isValid ? '' : ', not valid'}`;
    case 'seek.retreated':
      return `${body.step} went back to ${retreatText(body)}: ${body.reason}`;
    case 'check.decided':
      return `${body.step} ${met(body.isMet)}: ${body.criterion}`;
    case 'guard.intervened':
      return `The guard held ${body.channel} at ${plainNumber(body.applied)} (${body.rule}; ${body.count} so far)`;
    case 'interlock.acted':
      return `Interlock ${body.interlock}, ${body.action}: ${body.message}`;
    case 'interlock.cleared':
      return `Interlock ${body.interlock} is clear again`;
    case 'interlock.acknowledged':
      return `Interlock ${body.interlock} acknowledged by ${body.by}`;
    case 'interlock.bypassed':
      return `Interlock ${body.interlock} bypassed by ${body.by} for at most ${body.forS} s: ${body.reason}`;
    case 'interlock.bypass-ended':
      return `Bypass of interlock ${body.interlock} ${body.by === null ? 'ran out' : `ended by ${body.by}`}`;
    case 'interlock.forced':
      return `Proof test by ${body.by}: interlock ${body.interlock} takes its condition as true`;
    case 'move.hold-timed-out':
      return `Hold-to-move of ${body.channel} was not renewed in time: stopped where it was`;
    case 'connection.lost':
      return `Connection ${body.connection} lost: ${body.message}`;
    case 'connection.restored':
      return `Connection ${body.connection} is back`;
    case 'connection.fault-injected':
      return `Fault put on connection ${body.connection} by ${body.by}: ${body.fault.kind}`;
    case 'connection.fault-cleared':
      return `Fault taken off connection ${body.connection} by ${body.by}`;
    case 'scan.overran':
      return overrunText(body);
    case 'rig.tripped':
      return `Tripped by ${body.cause}: ${body.message}`;
  }
}

function retreatText({ to, point }: Extract<RunEventBody, { type: 'seek.retreated' }>): string {
  const places = Object.entries(point ?? {});
  if (places.length < 2) return plainNumber(to);
  return places.map(([channel, value]) => `${channel} ${plainNumber(value)}`).join(', ');
}

function overrunText(body: Extract<RunEventBody, { type: 'scan.overran' }>): string {
  const { count = 1, latenessMs, consecutive } = body;
  const late = `${Math.round(latenessMs)} ms late${consecutive > 1 ? ` (${consecutive} in a row)` : ''}`;
  return count === 1 ? `A scan was ${late}` : `${count} scans were up to ${late}`;
}

/** What is abnormal is marked in the list; survey points are detail. */
export function eventWeight(body: RunEventBody): 'trip' | 'warn' | 'plain' | 'detail' {
  switch (body.type) {
    case 'rig.tripped':
      return 'trip';
    case 'interlock.acted':
      return body.action === 'trip' ? 'trip' : 'warn';
    case 'interlock.bypassed':
    case 'interlock.forced':
    case 'connection.lost':
    case 'connection.fault-injected':
    case 'scan.overran':
    case 'seek.retreated':
    case 'guard.intervened':
      return 'warn';
    case 'survey.point-measured':
      return 'detail';
    default:
      return 'plain';
  }
}
