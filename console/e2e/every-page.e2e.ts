import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { launchBrowser } from './browser.js';
import { Product } from './product.js';

/** The rules of WCAG 2.2, levels A and AA, as axe-core checks them. */
const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
const wcag = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'];

interface Finding {
  id: string;
  help: string;
  nodes: { target: unknown; failureSummary?: string }[];
}

const looks = [
  { width: 1440, scheme: 'light' },
  { width: 1440, scheme: 'dark' },
  { width: 360, scheme: 'light' },
  { width: 360, scheme: 'dark' },
] as const;

let product: Product;
let browser: Browser;
const paths: Record<string, string> = {};

beforeAll(async () => {
  product = await Product.start(['--seed', '3', '--speed', '3'], true);
  browser = await launchBrowser();
  const page = await openAs('engineer', 1440, 'light');
  const [experimentId = ''] = Object.values(product.loaded?.rigs[0]?.experiments ?? {});
  const headers = { Origin: product.url };
  await vi.waitFor(
    async () =>
      expect((await page.request.post('/api/v1/rigs/burner-1/arm', { headers })).status()).toBe(200),
    { timeout: 40_000, interval: 500 },
  );
  const started = await page.request.post('/api/v1/runs', { headers, data: { experimentId } });
  expect(started.status()).toBe(202);
  const run = (await started.json()) as { id: string };
  Object.assign(paths, {
    floor: '/',
    rig: '/rigs/burner-1',
    envelope: '/rigs/burner-1/envelope',
    wiring: '/rigs/burner-1/wiring',
    'new rig': '/new-rig',
    objectives: '/objectives',
    experiments: '/experiments',
    experiment: `/experiments/${experimentId}`,
    runs: '/runs',
    run: `/runs/${run.id}`,
    people: '/people',
    account: '/account',
    'nothing at this address': '/no/such/page',
  });
});

afterAll(async () => {
  await browser?.close();
  await product?.end();
});

async function openAs(account: string, width: number, scheme: 'light' | 'dark'): Promise<Page> {
  const context = await browser.newContext({
    baseURL: product.url,
    viewport: { width, height: 800 },
    colorScheme: scheme,
    reducedMotion: 'reduce',
  });
  const answer = await context.request.post('/api/v1/auth/sign-in', {
    data: { account, password: product.passwordOf(account) },
    headers: { Origin: product.url },
  });
  expect(answer.status()).toBe(200);
  return context.newPage();
}

/** What axe-core finds, in words short enough to read in a report. */
async function findings(page: Page): Promise<string[]> {
  const violations = await page.evaluate<Finding[]>(
    `${axeSource}; axe.run(document, { runOnly: ${JSON.stringify(wcag)} }).then((result) => result.violations)`,
  );
  return violations.flatMap(({ id, help, nodes }) =>
    nodes.slice(0, 3).map((node) => `${id}: ${help} at ${JSON.stringify(node.target)}`),
  );
}

describe('every page', () => {
  it.each(looks)(
    'at $width px, $scheme, fits, has no fault of access and none in the console',
    async (look) => {
      const page = await openAs(look.width > 1000 ? 'engineer' : 'technician', look.width, look.scheme);
      const faults: string[] = [];
      page.on('pageerror', (error) => faults.push(error.message));
      page.on('console', (message) => {
        if (message.type() === 'error') faults.push(message.text());
      });
      for (const [name, path] of Object.entries(paths)) {
        await page.goto(path);
        await page.getByRole('heading', { level: 1 }).waitFor();
        await page.waitForLoadState('networkidle').catch(() => undefined);
        const width = await page.evaluate(() => document.documentElement.scrollWidth);
        expect(width, `${name} is wider than the window`).toBeLessThanOrEqual(look.width);
        expect(await findings(page), name).toEqual([]);
        expect(faults, name).toEqual([]);
      }
      await page.context().close();
    },
  );

  it('works by keyboard: the first Tab leads to the page past the strip, and the stop answers to its shortcut', async () => {
    const page = await openAs('engineer', 1440, 'light');
    await page.goto('/');
    await page.getByRole('heading', { level: 1 }).waitFor();
    await page.keyboard.press('Tab');
    expect(await page.evaluate(() => document.activeElement?.textContent)).toBe('To the page');
    await page.keyboard.press('Control+Shift+S');
    await page.getByText('tripped', { exact: true }).first().waitFor();
  });
});
