/**
 * Bounds a wait.
 *
 * @returns what `work` gives, or `fallback` after `boundMs`; a late rejection is swallowed
 */
export async function within<T, F>(work: Promise<T>, boundMs: number, fallback: F): Promise<T | F> {
  let timer: NodeJS.Timeout | undefined;
  const bound = new Promise<F>((resolve) => {
    timer = setTimeout(() => resolve(fallback), boundMs);
  });
  work.catch(() => undefined);
  try {
    return await Promise.race([work, bound]);
  } finally {
    clearTimeout(timer);
  }
}
