/** A batch from its first stamp to a layout made by hand, as a maker walks it; then by keyboard alone, as a helper, and under axe. */
import axe from 'axe-core';
import type { Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { layTable, STAMPS } from '../api/batch-table.ts';
import { sentiment } from '../benchmarks/fit-corpus.ts';
import { openBrowserKit } from './kit.ts';
import type { BrowserKit } from './kit.ts';

/** Lettering in open fonts, so that outlines are what a reading gives. */
const FONTS = ['dancing-script', 'pacifico', 'great-vibes', 'quicksand', 'lora', 'josefin-sans', 'dancing-script', 'lora'];

let kit: BrowserKit;
let page: Page;
let batchAddress = '';
beforeAll(async () => {
  kit = await openBrowserKit();
  const maker = await kit.kit.signIn('maker');
  const table = await layTable(maker);
  for (const [i, [name, [widthMm]]] of Object.entries(STAMPS).entries()) {
    const artwork = sentiment(name, FONTS[i], widthMm, 300);
    const points = artwork.rings.flat();
    await kit.kit.db('sentiments').where({ id: table.sentiments[name] })
      .update({ artwork: JSON.stringify(artwork), outlined: true, width_mm: Math.max(...points.map((p) => p.x)), height_mm: Math.max(...points.map((p) => p.y)) });
  }
  page = await kit.openAs('maker', 'batches');
  page.setDefaultTimeout(15_000);
});
afterAll(async () => {
  await kit.close();
  expect(kit.faults).toEqual([]);
});

async function violations(on: Page): Promise<string[]> {
  await on.evaluate(axe.source);
  const found = await on.evaluate(async () => (await (window as unknown as { axe: { run(options: object): Promise<{ violations: { id: string; nodes: { html: string }[] }[] }> } }).axe.run({ runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'] })).violations);
  return found.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`);
}
const step = (name: string) => page.getByRole('navigation', { name: 'Steps of the batch' }).getByRole('link', { name: new RegExp(name) });
const faultList = () => page.locator('.faults').getByRole('listitem');
const place = (number: number) => page.getByRole('group', { name: 'Labels of this setup' }).locator('label').nth(number - 1);

describe('a batch of 24 cards', () => {
  it('begins from the empty list with designs times people', async () => {
    await page.getByRole('heading', { name: 'No batch yet' }).waitFor();
    await page.getByRole('link', { name: 'Begin a batch' }).first().click();
    await page.getByLabel('Name').fill('Club evening');
    await page.getByLabel('Designs').fill('2');
    await page.getByLabel('People').fill('12');
    await page.getByText('24 cards', { exact: true }).waitFor();
    await page.getByRole('button', { name: 'Begin and choose stamps' }).click();
    await page.getByRole('heading', { name: 'Club evening' }).waitFor();
    batchAddress = new URL(page.url()).pathname.replace(/\/choose$/, '');
  });

  it('takes stamps by one tap each, tells the wood-mounted one, and shares the cards', async () => {
    await page.getByText('Wood-mounted: not for the lid').waitFor();
    for (const name of Object.keys(STAMPS)) {
      await page.getByRole('button', { name: `Add ${name}` }).click();
      await page.getByRole('button', { name: `Take out ${name}` }).waitFor();
    }
    await page.getByRole('button', { name: 'Spread the cards evenly' }).click();
    await page.getByText('24 labels on 24 cards.').waitFor();
    const first = page.locator('li.line').first();
    await first.getByLabel('On cards').fill('7');
    await page.getByText('27 labels on 24 cards.').waitFor();
    await page.getByText('3 labels more than cards.').waitFor();
    await first.getByLabel('Overs').fill('1');
    await page.getByLabel('Ink for all labels').selectOption({ label: 'Night blue' });
    await page.getByLabel('Cardstock for all labels').selectOption({ label: 'Smooth white' });
    await step('Choose').getByText('6 stamps, 28 labels').waitFor();
    await page.reload();
    expect(await page.locator('li.line').first().getByLabel('On cards').inputValue()).toBe('7');
  });

  it('takes the recommended dies, and a stamp is moved inside its label by keyboard with the border told', async () => {
    await page.getByRole('link', { name: 'Go on to the dies' }).click();
    await page.getByRole('button', { name: 'Take the recommended dies' }).click();
    await step('Fit').getByLabel('Done').waitFor();
    const thanks = page.getByRole('region', { name: 'Thank you' });
    expect(await thanks.getByRole('group', { name: 'Die for Thank you' }).getByRole('radio', { checked: true }).count()).toBe(1);
    await thanks.getByRole('button', { name: 'Move inside the label' }).click();
    const dialog = page.getByRole('dialog');
    const border = async () => parseFloat((await dialog.getByRole('status').locator('strong').textContent())!);
    const before = await border();
    await dialog.getByRole('application').focus();
    await page.keyboard.press('ArrowDown');
    await expect.poll(border).toBeCloseTo(before - 1, 1);
    await dialog.getByRole('button', { name: 'Keep this place' }).click();
    await thanks.getByText('moved by hand').waitFor();
    await thanks.getByRole('button', { name: 'Back to the best place' }).click();
    await expect.poll(() => thanks.getByText('moved by hand').count()).toBe(0);
  });

  it('is planned with progress, and every figure has its proof beside it', async () => {
    await page.getByRole('link', { name: 'Go on to the sheet' }).click();
    await page.getByLabel('Run sheet, width').fill('139.7');
    await page.getByLabel('Run sheet, height').fill('6 1/2 in');
    await page.getByRole('button', { name: 'Plan the batch' }).click();
    await page.getByRole('button', { name: 'Move labels by hand' }).waitFor({ timeout: 60_000 });
    const proofs = await page.locator('.figures .proof').allTextContents();
    expect(proofs).toHaveLength(5);
    for (const proof of proofs) expect(proof).toMatch(/impossible|At least/);
    await page.getByText('28 labels are made.').waitFor();
    await step('Lay out').getByText(/Plan 1, \d+ sheets?/).waitFor();
  });

  it('shows the opened lid mirrored, with numbers that still read', async () => {
    const numbers = () => page.locator('.sheet-drawing .number').evaluateAll((all) => all.map((one) => one.getAttribute('transform')));
    const seen = await numbers();
    await page.getByText('Lid, opened').click();
    await page.waitForURL(/side=lid/);
    const mirrored = await numbers();
    const x = (transform: string | null) => Number(/translate\(([-\d.]+)/.exec(transform ?? '')![1]);
    // Hinge at the left: x goes to the bed's width, 160 mm, less x.
    mirrored.forEach((transform, i) => expect(x(transform)).toBeCloseTo(160 - x(seen[i]), 6));
    await page.getByText('Sheet, from above').click();
  });
});

describe('the sheet under a person’s hands', () => {
  it('tells the missing distance while one label is dragged onto another; undo takes the whole drag back', async () => {
    await page.getByRole('button', { name: 'Move labels by hand' }).click();
    await page.getByText('Every distance is kept.').waitFor();
    const places = page.locator('.place.grabbable');
    const from = (await places.nth(0).boundingBox())!, to = (await places.nth(1).boundingBox())!;
    await page.mouse.move(from.x + from.width / 2, from.y + from.height / 2);
    await page.mouse.down();
    await page.mouse.move(to.x + to.width / 2, to.y + to.height / 2, { steps: 6 });
    await page.getByText(/Labels 1 and 2 stand too near to each other: [\d.]+ mm missing\./).waitFor();
    await page.mouse.up();
    expect(await page.getByRole('button', { name: 'Keep this layout' }).isDisabled()).toBe(true);
    await page.getByRole('button', { name: 'Undo' }).click();
    await page.getByText('Every distance is kept.').waitFor();
    expect(await page.getByRole('button', { name: 'Undo' }).isDisabled()).toBe(true);
    await page.getByRole('button', { name: 'Redo' }).click();
    await faultList().first().waitFor();
    await page.getByRole('button', { name: 'Back to the planned layout' }).click();
    await page.getByText('Every distance is kept.').waitFor();
  });

  it('gives a drag up at Esc', async () => {
    const first = page.locator('.place.grabbable').nth(0);
    const from = (await first.boundingBox())!;
    await page.mouse.move(from.x + from.width / 2, from.y + from.height / 2);
    await page.mouse.down();
    await page.mouse.move(from.x + from.width / 2 + 90, from.y + from.height / 2 + 60, { steps: 5 });
    await page.keyboard.press('Escape');
    await page.mouse.up();
    await page.getByText('Every distance is kept.').waitFor();
    expect((await first.boundingBox())!.x).toBeCloseTo(from.x, 0);
  });

  it('moves by keyboard alone: chosen in the list, 1 mm, 5 mm, 0.1 mm, typed, pinned; the rest is planned round the pin', async () => {
    await page.getByRole('application', { name: /^Sheet/ }).focus();
    await page.keyboard.press('Escape');
    await place(1).getByRole('checkbox').focus();
    await page.keyboard.press('Space');
    const x = () => page.getByRole('textbox', { name: 'x' });
    const before = parseFloat(await x().inputValue());
    await page.getByRole('application', { name: /^Sheet/ }).focus();
    await page.keyboard.press('ArrowRight');
    await page.keyboard.press('Shift+ArrowRight');
    await page.keyboard.press('Alt+ArrowRight');
    await expect.poll(async () => parseFloat(await x().inputValue())).toBeCloseTo(before + 6.1, 1);
    await page.keyboard.press('Control+z');
    await page.keyboard.press('Control+z');
    await page.keyboard.press('Control+z');
    await expect.poll(async () => parseFloat(await x().inputValue())).toBeCloseTo(before, 1);
    await page.getByRole('button', { name: 'Pin', exact: true }).focus();
    await page.keyboard.press('Enter');
    await place(1).getByText('pinned').waitFor();
    await page.getByRole('button', { name: 'Plan the rest round the pin' }).focus();
    await page.keyboard.press('Enter');
    await page.getByRole('button', { name: 'Move labels by hand' }).waitFor({ timeout: 60_000 });
    await page.getByRole('button', { name: 'Move labels by hand' }).click();
    await page.getByRole('group', { name: 'Labels of this setup' }).getByText('pinned').waitFor();
  });

  it('asks before an unsaved layout is left', async () => {
    await place(2).getByRole('checkbox').check();
    await page.getByRole('application', { name: /^Sheet/ }).focus();
    await page.keyboard.press('ArrowDown');
    await step('Fit').click();
    await page.getByRole('dialog', { name: 'Leave without saving?' }).getByRole('button', { name: 'Stay here' }).click();
    expect(page.url()).toContain('edit=true');
    await page.keyboard.press('Control+z');
  });
});

describe('for everyone', () => {
  it('a helper sees the plan and no maker’s buttons', async () => {
    const helper = await kit.openAs('helper', `${batchAddress.split('/').slice(3).join('/')}/lay-out`);
    await helper.locator('.sheet-drawing').first().waitFor();
    expect(await helper.getByRole('button', { name: /Plan again|Move labels/ }).count()).toBe(0);
    await helper.close();
  });

  it.each([['light', 1440], ['dark', 1440], ['light', 390]] as const)('axe finds nothing on any step, %s at %i px, and nothing is wider than the window', async (colorScheme, width) => {
    const other = await kit.openAs('maker', 'batches', { width, colorScheme });
    await other.getByRole('link', { name: 'Club evening' }).waitFor();
    expect(await violations(other)).toEqual([]);
    for (const at of ['choose', 'fit', 'lay-out', 'lay-out?edit=true']) {
      await other.goto(`${batchAddress}/${at}`);
      await other.locator(at === 'choose' ? 'li.line' : at === 'fit' ? '.pair' : '.sheet-drawing').first().waitFor();
      expect(await violations(other), at).toEqual([]);
      expect(await other.evaluate(() => document.documentElement.scrollWidth), at).toBeLessThanOrEqual(width);
    }
    await other.close();
  });
});
