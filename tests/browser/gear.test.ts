/** Gear as makers and helpers work with it: two people at once, things deleted and brought back, the connection gone for a while. */
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openBrowserKit } from './kit.ts';
import type { BrowserKit } from './kit.ts';

let kit: BrowserKit;
let page: Page;
beforeAll(async () => {
  kit = await openBrowserKit();
  page = await kit.openAs('maker', 'gear/inks');
  page.setDefaultTimeout(10_000);
});
afterAll(async () => {
  await kit.close();
  expect(kit.faults).toEqual([]);
});

const notice = (words: string) => page.locator('.notices').getByText(words);
const note = (on: Page) => on.getByLabel('Note');

describe('an ink', () => {
  it('is added from the empty list, with a length typed in inches', async () => {
    await page.getByRole('heading', { name: 'No inks yet' }).waitFor();
    await page.getByRole('link', { name: 'Add an ink' }).first().click();
    await page.getByLabel('Name', { exact: true }).fill('Plum');
    await page.getByText('Solvent', { exact: true }).click();
    await page.getByText('Ventilate').waitFor();
    await page.getByRole('textbox', { name: 'Pad clearance' }).fill('1/2');
    await page.getByRole('button', { name: 'Add an ink' }).click();
    await page.getByRole('link', { name: 'Plum' }).click();
    expect(await page.getByRole('textbox', { name: 'Pad clearance' }).inputValue()).toBe('12.7 mm');
    expect(await page.getByRole('radio', { name: 'Solvent' }).isChecked()).toBe(true);
  });

  it('is deleted after a question and brought back by Undo', async () => {
    await page.getByRole('button', { name: 'Delete' }).click();
    await page.getByRole('dialog', { name: 'Delete Plum?' }).getByRole('button', { name: 'Delete' }).click();
    await page.getByRole('heading', { name: 'No inks yet' }).waitFor();
    await page.getByRole('button', { name: 'Undo' }).click();
    await page.getByRole('link', { name: 'Plum' }).waitFor();
    await notice('Plum is back.').waitFor();
  });

  it('comes out of the bin as well, days later, at an address of its own', async () => {
    await page.getByRole('link', { name: 'Plum' }).click();
    await page.getByRole('button', { name: 'Delete' }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Delete' }).click();
    await page.getByRole('heading', { name: 'No inks yet' }).waitFor();
    await page.getByRole('button', { name: 'Bin' }).click();
    await page.waitForURL(/bin=true/);
    await page.reload();
    await page.getByRole('button', { name: 'Bring back Plum' }).click();
    await page.getByText('The bin is empty.').waitFor();
    await page.getByRole('button', { name: 'Back to the list' }).click();
    await page.getByRole('link', { name: 'Plum' }).waitFor();
  });

  it('shows at once what another person changed, but never under what is being typed', async () => {
    await page.getByRole('link', { name: 'Plum' }).click();
    await page.getByRole('heading', { name: 'Plum', level: 1 }).waitFor();
    const other = await kit.openAs('maker', new URL(page.url()).pathname.split('/').slice(3).join('/'));
    await note(other).fill('first word of the other');
    await other.getByRole('button', { name: 'Save' }).click();
    await expect.poll(() => note(page).inputValue()).toBe('first word of the other');

    await note(page).fill('half typed');
    await note(other).fill('second word of the other');
    await other.getByRole('button', { name: 'Save' }).click();
    await other.locator('.notices').getByText('Plum is saved.').last().waitFor();
    expect(await note(page).inputValue()).toBe('half typed');

    await page.getByRole('button', { name: 'Save' }).click();
    const both = page.getByRole('dialog', { name: 'Plum was changed meanwhile' });
    expect((await both.locator('tbody tr').allInnerTexts()).map((row) => row.split(/\s*\t\s*/))).toEqual([['Note', 'half typed', 'second word of the other']]);
    await both.getByRole('button', { name: 'Save mine over it' }).click();
    await expect.poll(() => note(other).inputValue()).toBe('half typed');
    await other.context().close();
  });

  it('keeps what was typed when the connection is gone, says so, and saves when it is back', async () => {
    await note(page).fill('typed while away');
    await page.context().setOffline(true);
    await page.getByRole('button', { name: 'Save' }).click();
    await page.getByRole('alert').getByText('cannot be reached').waitFor();
    expect(await note(page).inputValue()).toBe('typed while away');
    await page.context().setOffline(false);
    await page.getByRole('button', { name: 'Save' }).click();
    await page.getByRole('alert').waitFor({ state: 'detached' });
    await page.reload();
    await expect.poll(() => note(page).inputValue()).toBe('typed while away');
  });

  it('is not left with something unsaved unless the person says so', async () => {
    await note(page).fill('not yet saved');
    await page.getByRole('link', { name: 'Studio', exact: true }).click();
    await page.getByRole('dialog', { name: 'Leave without saving?' }).waitFor();
    await page.keyboard.press('Escape');
    expect(await note(page).inputValue()).toBe('not yet saved');
    await page.getByRole('link', { name: 'Studio', exact: true }).click();
    await page.getByRole('button', { name: 'Leave without saving' }).click();
    await page.getByRole('heading', { name: 'People' }).waitFor();
  });

  it('is seen by a helper, who finds no button that she may not press', async () => {
    const helper = await kit.openAs('helper', 'gear/inks');
    await helper.getByRole('link', { name: 'Plum' }).waitFor();
    expect(await helper.getByRole('link', { name: 'Add an ink' }).count()).toBe(0);
    await helper.getByRole('link', { name: 'Plum' }).click();
    await helper.getByText('A maker of the studio can change this.').waitFor();
    expect(await helper.getByRole('button', { name: /Save|Delete/ }).count()).toBe(0);
    expect(await note(helper).isDisabled()).toBe(true);
    await helper.context().close();
  });
});

describe('a platform', () => {
  it('shows each keep-out in its drawing, and says by the field when one reaches past the bed', async () => {
    await page.goto(`/s/${kit.kit.studioId}/gear/platforms/new`);
    await page.getByLabel('Name', { exact: true }).fill('Small bed');
    await page.getByLabel('Bed width').fill('160');
    await page.getByLabel('Bed depth').fill('170');
    await page.getByRole('button', { name: 'Add a keep-out' }).click();
    const box = page.getByRole('group', { name: 'Keep-out 1' });
    await box.getByLabel('From the left').fill('150');
    await page.getByRole('img', { name: /160 × 170 mm.*1 keep-out/ }).waitFor();
    await page.getByRole('button', { name: 'Add a platform' }).click();
    await page.getByText('Keep-out 1 reaches past the bed.').waitFor();
    await box.getByLabel('From the left').fill('130');
    await page.getByRole('button', { name: 'Add a platform' }).click();
    await page.getByRole('link', { name: 'Small bed' }).waitFor();
    await page.getByText('1 keep-out').waitFor();
  });
});

describe('cardstock', () => {
  it('is counted in the list by two people at once, and both counts hold', async () => {
    await page.goto(`/s/${kit.kit.studioId}/gear/cardstocks/new`);
    await page.getByLabel('Name', { exact: true }).fill('Kraft');
    await page.getByRole('button', { name: 'Add a cardstock' }).click();
    await page.getByRole('group', { name: 'Sheets of Kraft on hand' }).getByText('0 on hand').waitFor();
    const other = await kit.openAs('maker', 'gear/cardstocks');
    await Promise.all([page.getByRole('button', { name: '+10 sheets of Kraft' }).click(), other.getByRole('button', { name: '+ one sheet of Kraft' }).click()]);
    for (const one of [page, other]) await one.getByRole('group', { name: 'Sheets of Kraft on hand' }).getByText('11 on hand').waitFor();
    await other.context().close();
  });
});
