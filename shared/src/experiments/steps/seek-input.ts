import type { CompiledExpression, Lookup } from '../../expressions/expression.types.js';
import type { Direction } from '../../objectives/objective.schema.js';
import type { SeekingInput } from '../../seeking/seeking-law.js';
import { isUsable } from '../../seeking/usable-number.js';
import { ditherOf } from '../seek/seek-fields.js';
import type { SeekParameters } from '../seek/seek-parameters.schema.js';
import type { SequencerInput } from '../sequencer.types.js';

/**
 * What a law is told in each scan. The law climbs: an objective to be minimised is fed with its sign turned, and the
 * inner signals are of what is fed.
 */
export class SeekInput {
  readonly fed: SeekingInput = { objective: NaN, isValid: false };
  /** Channel whose ripple is followed, by actuator; null where a dither is injected. */
  private readonly measuredChannels: readonly (string | null)[];

  /** @param constraint what a constrained law keeps on one side; null for none */
  constructor(
    { law, actuators }: SeekParameters,
    private readonly direction: Direction,
    private readonly constraint: CompiledExpression | null,
    private readonly lookup: Lookup,
  ) {
    this.measuredChannels = actuators.map((actuator) =>
      ditherOf(law.id, actuator) === 'measured' ? actuator.measuredChannel : null,
    );
    if (this.measuredChannels.some((channel) => channel !== null)) {
      this.fed.measured = new Float64Array(actuators.length).fill(NaN);
    }
  }

  /** @returns false where the objective is beyond all measure, so that no law can work with it */
  read({ objective, readings }: SequencerInput, bound: number): boolean {
    const { fed } = this;
    fed.objective = this.direction === 'minimise' ? -objective.value : objective.value;
    fed.isValid = objective.isValid && Number.isFinite(objective.value);
    if (this.constraint) {
      fed.constraint = this.constraint.evaluate(this.lookup);
      fed.bound = bound;
    }
    const measured = fed.measured as Float64Array | undefined;
    if (measured) {
      for (let i = 0; i < measured.length; i += 1) {
        const channel = this.measuredChannels[i] ?? null;
        measured[i] = channel === null ? NaN : readings.goodValue(readings.indexOf(channel));
      }
    }
    return !fed.isValid || isUsable(fed.objective);
  }

  /** Why a law goes back to its last good point, in words. */
  whyRetreated({ objective }: SequencerInput): string {
    const { fed } = this;
    if (!fed.isValid) return objective.whyInvalid ?? 'The objective is not valid.';
    if (this.constraint && !isUsable(fed.constraint)) return 'The constrained quantity has no good value.';
    const lost = this.measuredChannels.find((channel, i) => channel !== null && !isUsable(fed.measured?.[i]));
    return lost
      ? `"${lost}", on which the ripple is measured, has no good value.`
      : 'The law has no good value.';
  }
}
