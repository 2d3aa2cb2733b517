import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { launchBrowser, openWindow, signIn } from './browser.js';
import { Product } from './product.js';

let product: Product;
let browser: Browser;

beforeAll(async () => {
  product = await Product.start(['--seed', '5'], true);
  browser = await launchBrowser();
});

afterAll(async () => {
  await browser?.close();
  await product?.end();
});

/** A register map as a spreadsheet with a decimal comma saves it; addresses as the burner bench documents them. */
const registerMap = [
  'id;title;kind;unit;display.min;display.max;display.decimals;address.table;address.address;address.type;address.scale',
  'oxygen;Oxygen, dry;sensor;%;0;21;2;holding-register;3;u16;0,01',
  'trim;Air trim;actuator;%;0;100;1;holding-register;0;u16;0,01',
].join('\r\n');

async function fill(page: Page, label: string | RegExp, text: string): Promise<void> {
  await page.getByLabel(label).first().fill(text);
}

/** The address of the bench in the demo's own documents. */
function benchConfiguration(): { host: string; port: number } {
  return product.scenario.rigs[0]?.rig.connections[0]?.configuration as { host: string; port: number };
}

describe('wiring a rig', () => {
  it('imports a register map, shows the budget, saves, reads the device live, and calibrates with a certificate', async () => {
    const { page, faults } = await openWindow(browser, product.url);
    await signIn(page, 'engineer', product.passwordOf('engineer'));
    await page.getByRole('link', { name: 'Add a rig' }).click();
    await fill(page, /^Id of the rig/, 'burner-2');
    await fill(page, /^Title of the rig/, 'Burner 2');
    await page.getByLabel('Adapter').selectOption('modbus-tcp');
    await page.getByRole('button', { name: 'Add connection' }).click();
    const card = page.getByRole('group', { name: /modbus-tcp/ });
    const { host, port } = benchConfiguration();
    await card.getByLabel(/^Host/).fill(host);
    await card.getByLabel('Port', { exact: true }).fill(String(port));
    await page.getByRole('button', { name: 'Import …' }).click();
    const map = { name: 'map.csv', mimeType: 'text/csv', buffer: Buffer.from(`\uFEFF${registerMap}`) };
    await page.getByLabel('File').setInputFiles(map);
    await page.getByText('2 channels read, none at fault').waitFor();
    await page.getByRole('button', { name: 'Replace all channels' }).click();
    await page
      .getByText(/2 channels by (one request|2 requests)/)
      .first()
      .waitFor();
    await page.getByRole('button', { name: 'Save wiring' }).click();
    await page.getByRole('heading', { name: 'Wiring of Burner 2' }).waitFor();

    // The bench at rest: the damper stands where it was left, and no flame burns the oxygen of the air.
    await expect
      .poll(
        async () => {
          await page.getByRole('button', { name: 'Test all' }).click();
          return page.getByText(/^raw holding-register 3: 0x/).count();
        },
        { timeout: 15_000, interval: 500 },
      )
      .toBe(1);
    await page
      .getByText(/good, just now/)
      .first()
      .waitFor();

    await page.getByRole('button', { name: 'Calibrate …' }).click();
    await fill(page, 'Gain', '1,02');
    await page.getByText(/^raw .* reads/).waitFor();
    await fill(page, 'Due on', '2026-01-31');
    const certificate = {
      name: 'c.pdf',
      mimeType: 'application/pdf',
      buffer: Buffer.from('%PDF-1.4\nBTS-0042'),
    };
    await page.getByLabel(/^Certificate file/).setInputFiles(certificate);
    await page.getByRole('button', { name: 'Put in force' }).click();
    await page.getByText('▲ overdue since 2026-01-31').waitFor();
    const link = await page.getByRole('link', { name: /^Download/ }).getAttribute('href');
    const file = await page.request.get(link ?? '');
    expect((await file.body()).toString()).toBe('%PDF-1.4\nBTS-0042');
    expect(faults).toEqual([]);
    await page.context().close();
  });
});
