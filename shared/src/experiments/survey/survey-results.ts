import type { SurveyParameters } from './survey-parameters.schema.js';

/** Names of what a survey leaves behind, without that of the step. */
export function surveyResultNames({ actuators }: SurveyParameters): string[] {
  return [
    /** Where the chosen hill is highest, as measured. */
    ...actuators.map(({ channel }) => `best.${channel}`),
    'best.objective',
    /** Hills that stand out of the noise. */
    'peaks',
    /** How far the objective must get worse on the way from the chosen hill to a better place. */
    'prominence',
    /** Size of the second derivative at the top of the chosen hill, objective unit / actuator unit². */
    ...actuators.flatMap(({ channel }) => [`curvature.${channel}`, `curvatureError.${channel}`]),
    /** Standard deviation of the objective from scan to scan while everything stood. */
    'noise',
    /** Greatest difference between two ways over the same point; one way only shows none. */
    ...(actuators.some(({ isUpAndDown }) => isUpAndDown) ? ['hysteresis'] : []),
    /** Width of the actuator's backlash, actuator unit, where it went up and down. */
    ...actuators
      .filter(({ isUpAndDown }) => isUpAndDown)
      .flatMap(({ channel }) => [`backlash.${channel}`, `backlashError.${channel}`]),
  ];
}
