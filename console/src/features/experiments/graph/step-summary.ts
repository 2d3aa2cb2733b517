import { seekingLaws, type NumericParameter, type Rig, type Step } from '@cresthold/shared';

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
    case 'survey': {
      const { actuators } = step.parameters;
      const points = actuators.map((actuator) => actuator.points).join(' × ');
      const isBack = actuators.some(({ isUpAndDown }) => isUpAndDown);
      return [
        ...actuators.map(({ channel, from, to }) =>
          `${channel} ${shown(from)} … ${shown(to)} ${unit(channel)}`.trimEnd(),
        ),
        `${points} points${isBack ? ', up and down' : ''}`,
      ];
    }
    case 'seek': {
      const { law, actuators, end } = step.parameters;
      return [
        `${seekingLaws[law.id].title}, ${end.afterS} s`,
        ...actuators.map(({ channel, amplitude }) =>
          `${channel} ± ${shown(amplitude)} ${unit(channel)}`.trimEnd(),
        ),
      ];
    }
    case 'check':
      return [step.parameters.criterion];
  }
}
