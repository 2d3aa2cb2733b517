import { DomainError } from '../errors/domain-error.js';
import { channelSymbols } from '../expressions/channel-symbols.js';
import type { CompiledExpression } from '../expressions/expression.types.js';
import { Quality } from '../rigs/quality.js';
import type { Rig } from '../rigs/rig.schema.js';
import { compileAll } from './compile-all.js';
import type { Readings } from './readings.js';

interface Derived {
  readonly index: number;
  readonly expression: CompiledExpression;
}

interface BoundDerived {
  readonly index: number;
  readonly evaluate: () => void;
}

/** The rig's derived channels in an order in which each stands behind those that it reads. */
export class DerivedChannels {
  private readonly ordered: readonly BoundDerived[];
  /** Where the expressions put their results. */
  private readonly result = new Float64Array(1);

  /** @throws expression.invalid naming each channel whose expression is faulty or reads itself */
  constructor(
    rig: Rig,
    private readonly readings: Readings,
  ) {
    const texts = rig.channels.flatMap((channel, index) =>
      channel.kind === 'derived' ? [{ id: channel.id, index, text: channel.expression }] : [],
    );
    const compiled = compileAll(
      texts.map(({ index, text }) => ({ field: `channels[${index}].expression`, text, isCondition: false })),
      channelSymbols(rig),
    );
    const open = new Map(
      texts.map(({ id, index }, i) => [id, { index, expression: compiled[i] as CompiledExpression }]),
    );
    this.ordered = inOrder(open).map(({ index, expression }) => ({
      index,
      evaluate: expression.bind(readings, this.result),
    }));
  }

  /**
   * Fills the derived channels; a bad input makes a bad channel.
   *
   * @realtime safe: allocates nothing
   */
  fill(): void {
    for (let i = 0; i < this.ordered.length; i += 1) {
      const { index, evaluate } = this.ordered[i] as BoundDerived;
      evaluate();
      this.readings.set(index, this.result[0] as number, Quality.good);
    }
  }
}

function inOrder(open: Map<string, Derived>): Derived[] {
  const ordered: Derived[] = [];
  while (open.size > 0) {
    const ready = [...open].filter(([, { expression }]) => !expression.symbols.some((s) => open.has(s)));
    if (ready.length === 0) {
      const circle = [...open.keys()].map((id) => `"${id}"`).join(', ');
      throw new DomainError(
        'expression.invalid',
        `The derived channels ${circle} read each other in a circle.`,
      );
    }
    for (const [id, derived] of ready) {
      ordered.push(derived);
      open.delete(id);
    }
  }
  return ordered;
}
