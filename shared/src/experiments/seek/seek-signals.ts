/** The column of a run in which a Seek leaves its estimate of an actuator. */
export function estimateColumn(stepId: string, channel: string): string {
  return `${stepId}.estimate.${channel}`;
}

/** What the column held in runs of earlier releases, whose seeks had one actuator. */
export function earlierEstimateColumn(stepId: string): string {
  return `${stepId}.estimate`;
}

/**
 * Names of a law's inner signals as a run records them: those of one actuator carry its channel, those of two
 * both, those of the whole law none. The order is the law's.
 *
 * @example
 * seekSignalNames(gradientLaw, ['airTrim']) // ['estimate.airTrim', 'washout.airTrim', 'demodulated.airTrim', 'gradient.airTrim']
 */
export function seekSignalNames(
  law: { signalNames(actuators: number): string[] },
  channels: readonly string[],
): string[] {
  // A law numbers its actuators from 1, but only where it has several.
  const ofTwo = new Set(law.signalNames(2));
  const channel = (digits: string) => channels[Number(digits) - 1] ?? digits;
  return law.signalNames(channels.length).map((name) => {
    if (channels.length === 1) {
      if (ofTwo.has(`${name}11`)) return `${name}.${channels[0]}.${channels[0]}`;
      return ofTwo.has(`${name}1`) ? `${name}.${channels[0]}` : name;
    }
    const [, stem = name, digits = ''] = /^(.*?)(\d+)$/.exec(name) ?? [];
    if (digits === '') return name;
    if (ofTwo.has(`${stem}11`)) return `${stem}.${channel(digits[0] ?? '')}.${channel(digits.slice(1))}`;
    return ofTwo.has(`${stem}1`) ? `${stem}.${channel(digits)}` : name;
  });
}
