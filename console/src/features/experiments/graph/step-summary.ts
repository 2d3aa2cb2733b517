import type { NumericParameter, Rig, Step } from '@cresthold/shared';

const shown = (parameter: NumericParameter): string =>
  typeof parameter === 'number' ? String(parameter) : parameter.expression;

/**
 * What a step does in a line or two, for its drawing.
 *
 * @example
 * stepSummary(holdOf30s, rig) // ['30 s']
 */
export function stepSummary(step: Step, rig: Rig): string[] {
  const unit = (channel: string) => rig.channels.find((other) => other.id === channel)?.unit ?? '';
  switch (step.kind) {
    case 'start':
    case 'finish':
      return [];
    case 'move':
      return step.parameters.targets.map(({ channel, value }) =>
        `${channel} → ${shown(value)} ${unit(channel)}`.trimEnd(),
      );
    case 'settle':
      return [
        `${step.parameters.channel} within ${step.parameters.band} ${unit(step.parameters.channel)}`.trimEnd(),
        `for ${step.parameters.forS} s`,
      ];
    case 'hold':
      return [`${step.parameters.durationS} s`];
    case 'survey':
      return [
        `${step.parameters.actuator} ${shown(step.parameters.from)} … ${shown(step.parameters.to)} ${unit(step.parameters.actuator)}`.trimEnd(),
        `${step.parameters.points} points${step.parameters.isUpAndDown ? ', up and down' : ''}`,
      ];
    case 'seek':
      return [
        `${step.parameters.actuator} ± ${shown(step.parameters.ditherAmplitude)} ${unit(step.parameters.actuator)}`.trimEnd(),
        `period ${shown(step.parameters.ditherPeriodS)} s, ${step.parameters.end.afterS} s`,
      ];
    case 'check':
      return [step.parameters.criterion];
  }
}
