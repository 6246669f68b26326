/**
 * What browser tests stand on: the whole application with a fresh database, the built pages, and Debian's Chromium. Tests do
 * what a person does and read what a person reads.
 */
import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { chromium } from 'playwright-core';
import type { Browser, Page } from 'playwright-core';
import type { Role } from '../../server/contract/shared.ts';
import { openKit, PASSWORD } from '../api/kit.ts';
import type { Kit, Person } from '../api/kit.ts';

export interface BrowserKit {
  kit: Kit;
  browser: Browser;
  /** A page of its own session, signed in as a new person of the role; `path` is below the studio's address. */
  openAs(role: Role, path: string, options?: { width?: number; height?: number; colorScheme?: 'light' | 'dark' }): Promise<Page & { person: Person }>;
  /** Errors that pages threw or wrote to their console, with the address. */
  faults: string[];
  close(): Promise<void>;
}

const checkout = fileURLToPath(new URL('../../', import.meta.url));

export async function openBrowserKit(): Promise<BrowserKit> {
  const clientFolder = process.env.TEST_CLIENT_FOLDER ?? (await buildClient());
  const kit = await openKit({ jobs: true, env: { CLIENT_FOLDER: clientFolder } });
  const executablePath = process.env.CHROMIUM ?? ['/usr/bin/chromium', '/usr/bin/chromium-browser'].find((path) => existsSync(path));
  const browser = await chromium.launch({ executablePath, args: ['--no-sandbox', '--disable-dev-shm-usage'] });
  const faults: string[] = [];

  return {
    kit, browser, faults,
    async openAs(role, path, { width = 1440, height = 900, colorScheme = 'light' } = {}) {
      const agent = await kit.signIn(role);
      const context = await browser.newContext({ viewport: { width, height }, baseURL: kit.url, colorScheme, locale: 'en-GB' });
      const page = await context.newPage();
      page.on('pageerror', (error) => faults.push(`${page.url()}: ${error.message}`));
      page.on('console', (message) => {
        // Refusals that a test provokes are answers, not faults of the page.
        if (message.type() === 'error' && !/Failed to load resource/.test(message.text())) faults.push(`${page.url()}: ${message.text()}`);
      });
      await page.goto('/sign-in');
      await page.getByLabel('E-mail').fill(agent.person.email);
      await page.getByLabel('Password', { exact: true }).fill(PASSWORD);
      await page.getByRole('button', { name: 'Sign in' }).click();
      await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
      await page.goto(`/s/${kit.studioId}/${path}`);
      return Object.assign(page, { person: agent.person });
    },
    async close() {
      await browser.close();
      await kit.close();
    },
  };
}

async function buildClient(): Promise<string> {
  const { ensureClient } = (await import(new URL('../../server/local/client-build.mjs', import.meta.url).href)) as { ensureClient(checkout: string): Promise<void> };
  await ensureClient(checkout);
  return `${checkout}dist/client`;
}
