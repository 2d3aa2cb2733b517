/** Waits until `ask` gives something, looking again every `everyMs`; fails with `what` after `withinMs`. */
export async function until<T>(
  what: string,
  ask: () => Promise<T | null | undefined | false> | T | null | undefined | false,
  withinMs = 20_000,
  everyMs = 50,
): Promise<T> {
  const endMs = performance.now() + withinMs;
  for (;;) {
    const answer = await ask();
    if (answer !== null && answer !== undefined && answer !== false) return answer;
    if (performance.now() > endMs) throw new Error(`Not within ${withinMs} ms: ${what}.`);
    await new Promise((resolve) => setTimeout(resolve, everyMs));
  }
}
