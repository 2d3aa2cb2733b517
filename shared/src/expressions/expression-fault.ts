/** What is wrong with an expression; caught where it is compiled. */
export class ExpressionFault extends Error {
  constructor(
    message: string,
    /** Text at fault, to find its place; null where unknown. */
    readonly culprit: string | null = null,
  ) {
    super(message);
  }
}
