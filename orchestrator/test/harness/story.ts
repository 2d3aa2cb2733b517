/**
 * `it` for tests that tell one story: each step stands on those before it, so after one that failed the
 * rest fail at once and say so, instead of waiting for what cannot come.
 */
export function storySteps(): (name: string, work: () => Promise<void> | void) => void {
  let failed: string | null = null;
  return (name, work) =>
    it(name, async () => {
      if (failed !== null) throw new Error(`Not tried: "${failed}" failed before.`);
      failed = name;
      await work();
      failed = null;
    });
}
