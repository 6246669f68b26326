/**
 * The whole way as a new user walks it: register, scan of a stamp set, nested dies, gear, batch, fit, plan, PDF, bench. The scan is made
 * here from open fonts; the PDF is rasterised by poppler and its cut lines and ink measured against the plan. SHOTS=<folder> keeps pictures.
 */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { drawSheet } from '../api/stamp-sheet.ts';
import { openBrowserKit } from './kit.ts';
import type { BrowserKit } from './kit.ts';

const WORDS = [
  { words: 'happy birthday', x: 20, y: 30, sizeMm: 13, font: 'dancing-script' }, { words: 'thank you', x: 112, y: 32, sizeMm: 11, font: 'pacifico' },
  { words: 'with love', x: 25, y: 70, sizeMm: 10, font: 'lora' }, { words: 'get well soon', x: 95, y: 72, sizeMm: 10, font: 'quicksand' },
  { words: 'hello', x: 30, y: 108, sizeMm: 16, font: 'lora' }, { words: 'congratulations', x: 88, y: 108, sizeMm: 8, font: 'josefin-sans' },
];
const folder = mkdtempSync(join(tmpdir(), 'journey-'));
let kit: BrowserKit;
let page: Page;
let studio = '';
let boxesMm: { w: number; h: number }[] = [];

afterEach(async ({ task }) => {
  if (task.result?.state === 'fail' && process.env.SHOTS) await page.screenshot({ path: join(process.env.SHOTS, `FAILED-${task.name.slice(0, 12)}.png`) });
});
beforeAll(async () => {
  const sheet = drawSheet(WORDS, { widthMm: 200, heightMm: 140, dpi: 300, grain: 0.3 });
  boxesMm = sheet.boxesMm;
  writeFileSync(join(folder, 'sheet.png'), sheet.png);
  kit = await openBrowserKit();
  const context = await kit.browser.newContext({ viewport: { width: 1440, height: 900 }, baseURL: kit.kit.url, locale: 'en-GB', acceptDownloads: true });
  page = await context.newPage();
  page.setDefaultTimeout(20_000);
});
afterAll(async () => {
  await kit.close();
});

/** A picture of the page at both widths, for people. */
async function shot(name: string): Promise<void> {
  if (!process.env.SHOTS) return;
  await page.waitForTimeout(500);
  await page.screenshot({ path: join(process.env.SHOTS, `${name}.png`) });
  await page.setViewportSize({ width: 390, height: 844 });
  await page.waitForTimeout(300);
  await page.screenshot({ path: join(process.env.SHOTS, `${name}-390.png`) });
  await page.setViewportSize({ width: 1440, height: 900 });
}

describe('a new card maker', () => {
  it('registers and names a studio', async () => {
    await page.goto('/register');
    await shot('register');
    await page.getByLabel('Your name').fill('Wren Hollis');
    await page.getByLabel('E-mail').fill('wren@tidewater.example');
    await page.getByLabel('Password', { exact: true }).fill('seven quiet herons 42');
    await page.getByLabel(/studio/i).fill('Tidewater card circle');
    await page.getByRole('button', { name: /register|create|make|start/i }).first().click();
    await page.waitForURL(/\/s\/[0-9a-f-]{36}/);
    studio = /\/s\/([^/]+)/.exec(page.url())![1];
  });

  it('gets every sentiment of her scan with its true size', async () => {
    await page.goto(`/s/${studio}/stamp-sets/new`);
    await page.locator('input[type=file]').setInputFiles(join(folder, 'sheet.png'));
    await page.getByLabel('Name', { exact: true }).fill('Kind words');
    await page.getByRole('button', { name: 'Add and read it' }).click();
    await page.getByRole('heading', { name: '6 sentiments' }).waitFor({ timeout: 60_000 });
    const { items } = await (await page.request.get(`/api/studios/${studio}/sentiments?limit=50`)).json() as { items: { widthMm: number; heightMm: number }[] };
    // Glyph boxes of the font file are the truth (opentype.js); the goal for flat scans is 0.2 mm.
    for (const box of boxesMm) {
      const nearest = Math.min(...items.map((item) => Math.max(Math.abs(item.widthMm - box.w), Math.abs(item.heightMm - box.h))));
      expect(nearest).toBeLessThan(0.2);
    }
    await shot('stamp-set');
  });

  it('enters a nested set of dies and sees what fits', async () => {
    await page.goto(`/s/${studio}/dies/new`);
    await page.getByLabel('Name of the set').fill('Nested stadiums');
    await page.getByLabel('Shape').selectOption({ label: 'Stadium' });
    await page.getByRole('textbox', { name: 'Width' }).fill('4 in');
    await page.getByRole('textbox', { name: 'Height' }).fill('36');
    await page.getByRole('textbox', { name: 'Each smaller by' }).fill('6');
    await shot('die-set-new');
    await page.getByRole('button', { name: 'Add the set with 4 dies' }).click();
    await page.getByRole('heading', { name: 'Nested stadiums' }).waitFor();
    await shot('die-set');
    await page.goto(`/s/${studio}/dies/fit-table`);
    await page.getByText('6 sentiments, 4 dies').waitFor();
    expect(await page.getByText('Recommended').count()).toBeGreaterThan(0);
    await shot('fit-table');
  });

  it('enters her platform, ink and cardstock', async () => {
    await page.goto(`/s/${studio}/gear/platforms/new`);
    await page.getByLabel('Name', { exact: true }).fill('Table press');
    await page.getByRole('textbox', { name: 'Bed width' }).fill('160');
    await page.getByRole('textbox', { name: 'Bed depth' }).fill('170');
    await page.getByRole('button', { name: 'Add a platform' }).click();
    await page.getByRole('link', { name: 'Table press' }).waitFor();
    await page.goto(`/s/${studio}/gear/inks/new`);
    await page.getByLabel('Name', { exact: true }).fill('Night blue');
    await page.getByRole('button', { name: 'Add an ink' }).click();
    await page.getByRole('link', { name: 'Night blue' }).waitFor();
    await page.goto(`/s/${studio}/gear/cardstocks/new`);
    await page.getByLabel('Name', { exact: true }).fill('Smooth white');
    await page.getByRole('textbox', { name: /width/i }).first().fill('8 1/2 in');
    await page.getByRole('textbox', { name: /height|depth|length/i }).first().fill('11 in');
    await page.getByRole('button', { name: 'Add a cardstock' }).click();
    await page.getByRole('link', { name: 'Smooth white' }).waitFor();
    await page.goto(`/s/${studio}/gear/platforms`);
    await shot('platforms');
  });

  it('begins a batch, takes the recommended dies and gets a plan with its proofs', async () => {
    await page.goto(`/s/${studio}/batches/new`);
    await page.getByLabel('Name', { exact: true }).fill('Club evening');
    await page.getByLabel('Designs').fill('2');
    await page.getByLabel('People').fill('6');
    await page.getByRole('button', { name: 'Begin and choose stamps' }).click();
    await page.getByRole('heading', { name: 'Club evening' }).waitFor();
    const add = page.getByRole('button', { name: /^Add (?!again)/ });
    await add.first().waitFor();
    for (let left = await add.count(); left > 0; left = await add.count()) {
      await add.first().click();
      await expect.poll(() => add.count()).toBeLessThan(left);
    }
    await page.getByRole('button', { name: 'Spread the cards evenly' }).click();
    await page.getByText('12 labels on 12 cards.').waitFor();
    await page.getByLabel('Ink for all labels').selectOption({ label: 'Night blue' });
    await page.getByLabel('Cardstock for all labels').selectOption({ label: 'Smooth white' });
    await shot('batch-choose');
    await page.getByRole('link', { name: 'Go on to the dies' }).click();
    await page.getByRole('button', { name: 'Take the recommended dies' }).click();
    await page.getByRole('navigation', { name: 'Steps of the batch' }).getByRole('link', { name: /Fit/ }).getByLabel('Done').waitFor();
    await shot('batch-fit');
    await page.getByRole('link', { name: 'Go on to the sheet' }).click();
    await page.getByRole('button', { name: 'Plan the batch' }).click();
    await page.getByRole('button', { name: 'Move labels by hand' }).waitFor({ timeout: 120_000 });
    await shot('batch-lay-out');
  });

  it('downloads a PDF on which poppler finds every cut line where the plan has it', async () => {
    await page.getByRole('link', { name: 'Go on to printing' }).click();
    await page.locator('figure svg').first().waitFor({ timeout: 60_000 });
    await shot('batch-print');
    const download = page.waitForEvent('download');
    await page.getByRole('button', { name: 'Download the PDF' }).click();
    const pdf = join(folder, 'run.pdf');
    await (await download).saveAs(pdf);
    expect(readFileSync(pdf).subarray(0, 5).toString()).toBe('%PDF-');
    await measurePlacingSheet(pdf);
    const batch = await (await page.request.get(`/api/studios/${studio}/batches/${batchId()}`)).json() as { state: string };
    expect(batch.state).toBe('printed');
  });

  it('works through the presses at the bench on a phone, and the record is there after a reload', async () => {
    await page.setViewportSize({ width: 390, height: 844 });
    await page.goto(`/s/${studio}/batches/${batchId()}/bench`);
    await page.getByRole('button', { name: /Press done/ }).waitFor();
    await page.getByRole('radio', { name: 'Missed' }).first().click();
    await page.getByRole('button', { name: 'Stamped again: clean now' }).first().click();
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(390);
    await shot('bench');
    await page.setViewportSize({ width: 390, height: 844 });
    await page.getByRole('button', { name: /Press done/ }).click();
    await page.getByText('Everything is saved.').waitFor();
    await page.reload();
    await page.getByText(/1 of \d+ presses/).waitFor();
    const bench = await (await page.request.get(`/api/studios/${studio}/batches/${batchId()}/bench`)).json() as { presses: { doneBy: string; impressions: { outcome: string; restamps: number }[] }[] };
    expect(bench.presses).toHaveLength(1);
    expect(bench.presses[0].doneBy).toBe('Wren Hollis');
    expect(bench.presses[0].impressions.filter((one) => one.restamps === 1 && one.outcome === 'clean')).toHaveLength(1);
  });
});

const batchId = () => /batches\/([0-9a-f-]{36})/.exec(page.url())![1];

/** Points of every cut line and ink outline of the placing sheet lie on printed lines, within 0.1 mm. */
async function measurePlacingSheet(pdf: string): Promise<void> {
  const base = `/api/studios/${studio}/batches/${batchId()}`;
  const { plan } = await (await page.request.get(base)).json() as { plan: { id: string } };
  const { pages } = await (await page.request.get(`${base}/plans/${plan.id}/template-pages?pages=placing,dies-face-up,ticket`)).json() as { pages: { name: string; heightMm: number; items: { kind: string; role: string; rings?: { x: number; y: number }[][] }[] }[] };
  const dpi = 600;
  const at = pages.findIndex(({ items }) => items.some((item) => item.role === 'body'));
  execFileSync('pdftoppm', ['-r', String(dpi), '-gray', '-f', String(at + 1), '-l', String(at + 1), pdf, join(folder, 'page')]);
  const file = readFileSync(join(folder, execFileSync('ls', [folder]).toString().split('\n').find((name) => name.startsWith('page') && name.endsWith('.pgm'))!));
  const head = /^P5\s+(\d+)\s+(\d+)\s+255\s/.exec(file.subarray(0, 64).toString('latin1'))!;
  const width = Number(head[1]), start = head[0].length, perMm = dpi / 25.4, reach = Math.floor(0.1 * perMm);
  const dark = (x: number, y: number): boolean => {
    for (let dy = -reach; dy <= reach; dy++) for (let dx = -reach; dx <= reach; dx++) if (file[start + (Math.round(y * perMm) + dy) * width + Math.round(x * perMm) + dx] < 225) return true;
    return false;
  };
  let seen = 0;
  for (const role of ['cut-line', 'ink']) {
    const outlines = pages[at].items.filter((item) => item.kind === 'path' && item.role === role).flatMap((item) => item.rings!);
    expect(outlines.length, `${role} among ${[...new Set(pages[at].items.map((item) => item.role))].join()}`).toBeGreaterThan(0);
    for (const ring of outlines) {
      const on = ring.filter((p) => dark(p.x, p.y)).length;
      seen++;
      // Dashed lines leave gaps; whole ones do not.
      expect(on / ring.length).toBeGreaterThan(role === 'ink' ? 0.97 : 0.5);
    }
  }
  expect(seen).toBeGreaterThan(6);
}
