/**
 * How long pages take and how large they are: four setups with all their pages (goals: 500 ms, 500 KB), and forty labels whose ink has 2,000 points each
 * (goal: 2 s). Least of five runs by the processor's own clock, so that what else the machine does counts little; outlines are drawn by a formula.
 */
import type { Outline } from '../../server/engine/geometry/types.ts';
import { renderPdf, templateDocument } from '../../server/engine/template/index.ts';
import type { RunOrder, RunPlan } from '../../server/engine/gangrun/types.ts';
import { LETTER, SAMPLE_LABELS, sampleRun, TWELVE } from '../engine/template-orders.ts';

const RUNS = 5;
const ALL = ['ticket', 'placing', 'lid', 'dies-face-up', 'dies-face-down'] as const;

/** Wavy rings that no simplification takes many points from: as many points as asked, in letters of about 40 each. */
function wavyInk(widthMm: number, heightMm: number, points: number): Outline {
  const letters = Math.max(1, Math.round(points / 40)), columns = Math.ceil(Math.sqrt((letters * widthMm) / heightMm)), rows = Math.ceil(letters / columns);
  const w = widthMm / columns, h = heightMm / rows, each = Math.round(points / letters);
  return {
    rings: Array.from({ length: letters }, (_, k) => Array.from({ length: each }, (_, i) => {
      const angle = (2 * Math.PI * i) / each, r = 0.34 + 0.1 * Math.sin(7 * angle + k);
      return { x: (k % columns + 0.5 + r * Math.cos(angle)) * w, y: (Math.floor(k / columns) + 0.5 + r * Math.sin(angle)) * h };
    })),
  };
}

function withInk(run: { order: RunOrder; plan: RunPlan }, points: number): { order: RunOrder; plan: RunPlan } {
  const stamps = run.order.stamps.map((stamp) => {
    const all = stamp.artwork.rings.flat();
    return { ...stamp, artwork: wavyInk(Math.max(...all.map((p) => p.x)), Math.max(...all.map((p) => p.y)), points) };
  });
  return { ...run, order: { ...run.order, stamps } };
}

export async function run(_options: { json?: boolean }): Promise<{ title: string; columns: string[]; rows: (string | number)[][] }> {
  const cases = [
    { name: '4 setups of 6 labels, 400 points each', ...withInk(sampleRun(1, { setups: 4 }), 400), printer: LETTER },
    { name: '4 setups, half turns', ...withInk(sampleRun(2, { setups: 4, turns: 2, rows: 2 }), 400), printer: LETTER },
    { name: '40 labels, 2,000 points each', ...withInk(sampleRun(3, { columns: 5, rows: 8, bed: { w: 260, h: 240 }, sheet: { w: 255, h: 235 } }), 2000), printer: TWELVE },
  ];
  const rows: (string | number)[][] = [];
  for (const { name, order, plan, printer } of cases) {
    let pagesMs = Infinity, pdfMs = Infinity, bytes = 0, pages = 0;
    for (let i = 0; i < RUNS; i++) {
      const start = process.cpuUsage();
      const document = templateDocument(order, plan, { pages: [...ALL], printer, unit: 'mm', title: 'Measured', labels: SAMPLE_LABELS });
      const half = process.cpuUsage(start);
      bytes = (await renderPdf(document)).length;
      const whole = process.cpuUsage(start);
      pages = document.pages.length;
      pagesMs = Math.min(pagesMs, (half.user + half.system) / 1000);
      pdfMs = Math.min(pdfMs, (whole.user + whole.system - half.user - half.system) / 1000);
    }
    rows.push([name, pages, Math.round(pagesMs), Math.round(pdfMs), Math.round(bytes / 1000)]);
  }
  return { title: 'Templates (processor time, least of 5)', columns: ['case', 'pages', 'describe ms', 'PDF ms', 'kB'], rows };
}
