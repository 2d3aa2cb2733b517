import { chromium, type Browser, type Page } from 'playwright-core';

/** Chromium as Debian installs it; `CRESTHOLD_CHROMIUM` names another. */
export function launchBrowser(): Promise<Browser> {
  return chromium.launch({
    executablePath: process.env['CRESTHOLD_CHROMIUM'] ?? '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  });
}

/** A fresh window, as a person of their own would open it; what its console says of errors is kept. */
export async function openWindow(
  browser: Browser,
  baseURL: string,
): Promise<{ page: Page; faults: string[] }> {
  const context = await browser.newContext({ baseURL, viewport: { width: 1440, height: 900 } });
  const page = await context.newPage();
  page.setDefaultTimeout(30_000);
  const faults: string[] = [];
  page.on('pageerror', (error) => faults.push(error.message));
  page.on('console', (message) => {
    // A refused request is part of the story and shown on the page.
    if (message.type() === 'error' && !message.text().startsWith('Failed to load resource')) {
      faults.push(message.text());
    }
  });
  return { page, faults };
}

export async function signIn(page: Page, account: string, password: string): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('Account').fill(account);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { name: 'Floor', level: 1 }).waitFor();
}
