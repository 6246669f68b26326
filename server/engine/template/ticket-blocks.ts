/**
 * The pieces a ticket is set from: tables with ruled lines, rows that grow with their words, boxes to tick; each a block that knows its height, so
 * that blocks can be flowed down pages. `scale` shrinks words and rows alike. Lengths mm, y down from the block's top.
 */
import { HAIR_MM, INK, line, rect, RULE, words } from './page-items.ts';
import { shortened, textWidth, wrapText } from './text-width.ts';
import type { PageItem } from './types.ts';

export interface Block { heightMm: number; draw(x: number, y: number): PageItem[]; /** Never the last on a page. */ keepWithNext?: boolean }

/** Words, or boxes to tick, each with what is written in it. */
export type Cell = string | { boxes: string[] };
export interface Column { title: string; /** Share of the table's width. */ share: number; bold?: boolean }

const TEXT_MM = 2.7;
const LINE_MM = 3.5;
const HEAD_MM = 2.3;
const PAD_MM = 0.9;
const BOX_MM = 4.4;
const BOX_GAP_MM = 0.9;

export function headingBlock(text: string, scale: number): Block {
  return { heightMm: 7.2 * scale, keepWithNext: true, draw: (x, y) => [words({ x, y: y + 5.6 * scale }, text, 3.4 * scale, 'heading', { bold: true })] };
}

export function textBlock(text: string, widthMm: number, scale: number, bullet = false): Block {
  const indent = bullet ? 3 * scale : 0;
  const lines = wrapText(text, widthMm - indent, TEXT_MM * scale);
  return {
    heightMm: (lines.length * LINE_MM + 0.5) * scale,
    draw: (x, y) => [
      ...(bullet ? [words({ x, y: y + 2.8 * scale }, '–', TEXT_MM * scale)] : []),
      ...lines.map((text, i) => words({ x: x + indent, y: y + (i * LINE_MM + 2.8) * scale }, text, TEXT_MM * scale)),
    ],
  };
}

export function tableBlocks(columns: readonly Column[], rows: readonly Cell[][], widthMm: number, scale: number): Block[] {
  const total = columns.reduce((sum, column) => sum + column.share, 0);
  const widths = columns.map((column) => (column.share * widthMm) / total);
  return [tableHead(columns, widths, widthMm, scale), ...rows.map((row) => tableRow(columns, widths, row, widthMm, scale))];
}

function tableHead(columns: readonly Column[], widths: readonly number[], widthMm: number, scale: number): Block {
  return {
    heightMm: 4 * scale, keepWithNext: true,
    draw: (x, y) => [
      ...placed(widths).map((at, i) => words({ x: x + at, y: y + 2.9 * scale }, shortened(columns[i].title, widths[i] - 1, HEAD_MM * scale), HEAD_MM * scale, 'caption')),
      line(x, y + 4 * scale, x + widthMm, y + 4 * scale, 'rule', { strokeMm: 0.25, stroke: INK }),
    ],
  };
}

function tableRow(columns: readonly Column[], widths: readonly number[], row: readonly Cell[], widthMm: number, scale: number): Block {
  const size = TEXT_MM * scale;
  const cells = row.map((cell, i) => (typeof cell === 'string' ? wrapText(cell, widths[i] - 2, size, columns[i].bold) : cell));
  const perLine = widths.map((w) => Math.max(1, Math.floor((w - 1) / ((BOX_MM + BOX_GAP_MM) * scale))));
  const heights = cells.map((cell, i) => (Array.isArray(cell) ? cell.length * LINE_MM : Math.ceil(cell.boxes.length / perLine[i]) * (BOX_MM + BOX_GAP_MM)));
  const heightMm = (Math.max(LINE_MM, ...heights) + 2 * PAD_MM) * scale;
  return {
    heightMm,
    draw: (x, y) => [
      ...placed(widths).flatMap((at, i): PageItem[] => {
        const cell = cells[i];
        if (Array.isArray(cell)) return cell.map((text, k) => words({ x: x + at, y: y + (PAD_MM + k * LINE_MM + 2.7) * scale }, text, size, 'words', columns[i].bold ? { bold: true } : {}));
        return cell.boxes.flatMap((text, k) => tickBox(x + at + (k % perLine[i]) * (BOX_MM + BOX_GAP_MM) * scale, y + (PAD_MM + Math.floor(k / perLine[i]) * (BOX_MM + BOX_GAP_MM)) * scale, text, scale));
      }),
      line(x, y + heightMm, x + widthMm, y + heightMm, 'rule', { strokeMm: HAIR_MM, stroke: RULE }),
    ],
  };
}

function tickBox(x: number, y: number, text: string, scale: number): PageItem[] {
  const side = BOX_MM * scale;
  const fitting = Math.min(2.2 * scale, (2.2 * scale * (side - 0.8)) / Math.max(textWidth(text, 2.2 * scale), 0.1));
  return [
    rect({ x, y, w: side, h: side }, 'tick-box', { strokeMm: 0.2, stroke: INK }),
    ...(text === '' ? [] : [words({ x: x + side / 2, y: y + side / 2 + 0.8 * scale }, text, fitting, 'caption', { align: 'middle' })]),
  ];
}

function placed(widths: readonly number[]): number[] {
  return widths.map((_, i) => widths.slice(0, i).reduce((sum, w) => sum + w, 0));
}

/** Pages of blocks, none of them empty; a block that is higher than a page stands alone. */
export function flowed(blocks: readonly Block[], heightMm: number): Block[][] {
  const pages: Block[][] = [[]];
  let used = 0;
  blocks.forEach((block, i) => {
    const page = pages[pages.length - 1];
    let needed = block.heightMm;
    for (let k = i; blocks[k].keepWithNext && k + 1 < blocks.length; k++) needed += blocks[k + 1].heightMm;
    const headed = i > 0 && blocks[i - 1].keepWithNext;
    if (page.length > 0 && used + needed > heightMm && !headed) {
      pages.push([block]);
      used = block.heightMm;
    } else {
      page.push(block);
      used += block.heightMm;
    }
  });
  return pages;
}
