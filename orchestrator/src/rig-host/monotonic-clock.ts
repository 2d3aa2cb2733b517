const originNs = process.hrtime.bigint();

/** Monotonic time since the process began, s; untouched by changes of the wall clock. */
export const monotonicS = (): number => Number(process.hrtime.bigint() - originNs) / 1e9;
