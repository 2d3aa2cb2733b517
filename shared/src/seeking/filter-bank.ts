/**
 * First-order low-passes side by side, discretised by the bilinear rule exactly as `stepLowPass` does it. Inputs and
 * outputs stand in arrays, so that no number is put on the heap on its way through a call.
 */
export interface FilterBank {
  /** rad/s */
  readonly corners: Float64Array;
  /** Written by the caller before each step; finite numbers. */
  readonly input: Float64Array;
  readonly output: Float64Array;
  readonly lastInput: Float64Array;
  /** The next input is taken for the steady state. */
  isEmpty: boolean;
}

export function createFilterBank(corners: Float64Array): FilterBank {
  const values = () => new Float64Array(corners.length);
  return { corners, input: values(), output: values(), lastInput: values(), isEmpty: true };
}

export function resetFilterBank(bank: FilterBank): void {
  bank.isEmpty = true;
}

/** Puts all filters at rest on `input`. */
export function restFilterBank(bank: FilterBank): void {
  bank.output.set(bank.input);
  bank.lastInput.set(bank.input);
  bank.isEmpty = false;
}

/** @realtime safe: allocates nothing */
export function stepFilterBank(bank: FilterBank, dtS: number): void {
  if (bank.isEmpty) {
    restFilterBank(bank);
    return;
  }
  const { corners, input, output, lastInput } = bank;
  for (let i = 0; i < input.length; i += 1) {
    const half = ((corners[i] as number) * dtS) / 2;
    const now = input[i] as number;
    output[i] = ((1 - half) * (output[i] as number) + half * (now + (lastInput[i] as number))) / (1 + half);
    lastInput[i] = now;
  }
}
