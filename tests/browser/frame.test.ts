/** The frame: getting in and out, the keyboard, and every page of account, studio and gear at every width in both appearances. */
import axe from 'axe-core';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openBrowserKit } from './kit.ts';
import type { BrowserKit } from './kit.ts';

let kit: BrowserKit;
beforeAll(async () => {
  kit = await openBrowserKit();
});
afterAll(async () => {
  await kit.close();
  expect(kit.faults).toEqual([]);
});

const focused = (page: Page) => page.evaluate(() => document.activeElement?.textContent?.trim() ?? '');
const WORDS = 'four quiet words here';

describe('getting in', () => {
  it('makes an account with a studio, and comes back to where it was after signing out and in', async () => {
    const context = await kit.browser.newContext({ baseURL: kit.kit.url });
    const page = await context.newPage();
    await page.goto('/register');
    await page.getByLabel('Name of the studio').fill('North window');
    await page.getByLabel('Your name').fill('Ida Feld');
    await page.getByLabel('E-mail').fill('ida@example.org');
    await page.getByLabel('Password', { exact: true }).fill('short');
    await page.getByRole('button', { name: 'Make the account' }).click();
    await page.getByText('At least 15 characters; 5 so far.').waitFor();
    await page.getByLabel('Password', { exact: true }).fill(WORDS);
    await page.getByRole('button', { name: 'Make the account' }).click();
    await page.getByRole('button', { name: /North window/ }).waitFor();

    const studio = new URL(page.url()).pathname.split('/')[2];
    await page.goto(`/s/${studio}/gear/inks?sort=kind`);
    await page.getByRole('button', { name: /Account of Ida Feld/ }).click();
    await page.getByRole('button', { name: 'Sign out' }).click();
    await page.waitForURL(/\/sign-in/);
    await page.goto(`/s/${studio}/gear/inks?sort=kind`);
    await page.getByLabel('E-mail').fill('ida@example.org');
    await page.getByLabel('Password', { exact: true }).fill('four other words here');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.getByRole('alert').waitFor();
    expect(await page.getByLabel('E-mail').inputValue()).toBe('ida@example.org');
    await page.getByLabel('Password', { exact: true }).fill(WORDS);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.waitForURL(/\/gear\/inks\?sort=kind$/);
    await context.close();
  });

  it('by an invitation makes a helper of who follows its link, once', async () => {
    const owner = await kit.openAs('owner', 'studio/members');
    await owner.getByRole('button', { name: 'Make a link' }).click();
    const link = await owner.locator('code').innerText();
    const context = await kit.browser.newContext({ baseURL: kit.kit.url });
    const page = await context.newPage();
    await page.goto(link);
    await page.getByText('As a helper you see everything').waitFor();
    await page.getByRole('link', { name: 'Make an account and join' }).click();
    await page.getByLabel('Your name').fill('Hanne Torv');
    await page.getByLabel('E-mail').fill('hanne@example.org');
    await page.getByLabel('Password', { exact: true }).fill(WORDS);
    await page.getByRole('button', { name: 'Make the account' }).click();
    await page.getByRole('button', { name: /Test studio/ }).waitFor();
    await owner.getByRole('list', { name: 'People of the studio' }).getByText('Hanne Torv', { exact: true }).waitFor();
    await owner.getByText('A helper').waitFor({ state: 'detached' });
    await page.goto(link);
    await page.getByRole('alert').getByText('is not here').waitFor();
    await Promise.all([context.close(), owner.context().close()]);
  });

  it('never leads to another site, whatever the address asks for', async () => {
    const page = await kit.openAs('maker', 'gear/inks');
    for (const to of ['//example.org', 'https://example.org', '/\\example.org']) {
      await page.goto(`/sign-in?to=${encodeURIComponent(to)}`);
      await page.waitForURL(/\/s\//);
      expect(new URL(page.url()).origin).toBe(kit.kit.url);
    }
    await page.context().close();
  });
});

describe('by keyboard alone', () => {
  it('the page is reached past the bar, menus open, step and close, and a new page takes the focus to its title', async () => {
    const page = await kit.openAs('owner', 'gear/platforms');
    await page.getByRole('heading', { name: 'Stamping platforms' }).waitFor();
    await page.keyboard.press('Tab');
    expect(await focused(page)).toBe('Skip to the page');
    await page.keyboard.press('Enter');
    await page.keyboard.press('Tab');
    expect(await focused(page)).toBe('Add a platform');

    await page.getByRole('button', { name: /Switch studio/ }).focus();
    await page.keyboard.press('Enter');
    await page.keyboard.press('ArrowDown');
    expect(await focused(page)).toBe('New studio…');
    await page.keyboard.press('Escape');
    expect(await focused(page)).toContain('Switch studio');

    await page.getByRole('link', { name: 'Printers' }).focus();
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { name: 'Printers', level: 1 }).waitFor();
    await page.getByRole('button', { name: 'Bin' }).focus();
    await page.keyboard.press('Enter');
    await page.getByText('Deleted things stay here for 30 days').waitFor();
    await page.context().close();
  });
});

describe('an address', () => {
  it('of nothing, or of a studio one is not in, says so and leads back', async () => {
    const page = await kit.openAs('maker', 'nowhere/at/all');
    await page.getByRole('heading', { name: 'Nothing at this address' }).waitFor();
    await page.goto('/s/0193a000-0000-7000-8000-000000000000/gear/inks');
    await page.getByRole('heading', { name: 'Nothing at this address' }).waitFor();
    await page.getByRole('link', { name: 'Go to your studio' }).click();
    await page.waitForURL(new RegExp(kit.kit.studioId));
    await page.context().close();
  });

  it('of a list that the server cannot give says what happened, never an empty list', async () => {
    const page = await kit.openAs('maker', 'gear/inks');
    await page.route('**/api/studios/*/inks*', (route) => route.fulfill({ status: 503, contentType: 'application/problem+json', body: JSON.stringify({ type: 'about:blank', title: '', status: 503, code: 'database-away', detail: 'The database does not answer.' }) }));
    await page.reload();
    await page.getByRole('alert').getByText('The database does not answer.').waitFor();
    expect(await page.getByText('No inks yet').count()).toBe(0);
    await page.unroute('**/api/studios/*/inks*');
    await page.getByRole('button', { name: 'Try again' }).click();
    await page.getByRole('heading', { name: 'No inks yet' }).waitFor();
    await page.context().close();
  });
});

/** Pages of account, studio and gear, each with what shows that it has come. */
const PAGES = [
  ['gear/platforms', 'Stamping platforms'], ['gear/platforms/new', 'Add a platform'], ['gear/printers/new', 'Add a printer'], ['gear/cardstocks/new', 'Add a cardstock'], ['gear/inks/new', 'Add an ink'],
  ['studio/members', 'People'], ['studio/settings', 'Settings'], ['studio/activity', 'Activity'], ['studio/bin', 'Bin'], ['search?search=a', 'Search'], ['../../account', 'Account'],
] as const;

describe('every page', () => {
  // The narrowest that has to reflow (WCAG 2.2, 1.4.10) in one appearance, the widest in the other.
  it.each([['light', 320], ['dark', 1440]] as const)('in %s at %i px has no accessibility fault that axe knows, and none is wider than the window', async (colorScheme, width) => {
    const page = await kit.openAs('owner', 'gear/platforms', { width, height: 800, colorScheme });
    const faults: string[] = [];
    for (const [path, title] of PAGES) {
      await page.goto(new URL(path, `${kit.kit.url}/s/${kit.kit.studioId}/`).href);
      await page.getByRole('heading', { name: title, level: 1 }).waitFor();
      await page.locator('[aria-busy=true]').first().waitFor({ state: 'detached' });
      await page.evaluate(axe.source);
      const found = await page.evaluate(() => (window as unknown as { axe: typeof axe }).axe.run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'] }));
      faults.push(...found.violations.map((v) => `${path}: ${v.id}, ${v.nodes[0].html.slice(0, 120)}`));
      const over = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      if (over > 0) faults.push(`${path}: ${over} px too wide`);
    }
    expect(faults).toEqual([]);
    await page.context().close();
  });
});
