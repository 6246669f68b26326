import { describe, expect, it } from 'vitest';
import { panned, pxPerScreen, resized, toPicture, wholePicture, zoomed } from '../../src/composables/picture-view.ts';
import { cutAcross, inLasso, outlinePath, rulerTicks, sentimentAt } from '../../src/composables/reading-shapes.ts';
import { createUndoHistory } from '../../src/stores/undo-history.ts';

const picture = { width: 2000, height: 1000 };
const pane = { width: 500, height: 500 };

describe('the view of a picture', () => {
  it('shows it whole, in the proportions of the pane', () => {
    const view = wholePicture(picture, pane);
    expect(view.w / view.h).toBeCloseTo(1, 9);
    expect(view.x).toBeLessThanOrEqual(0);
    expect(view.x + view.w).toBeGreaterThanOrEqual(2000);
    expect(view.y + view.h / 2).toBeCloseTo(500, 9);
  });
  it('keeps the place under the pointer when it is zoomed', () => {
    const view = wholePicture(picture, pane), screen = { x: 120, y: 260 };
    const before = toPicture(screen, view, pane);
    const after = toPicture(screen, zoomed(view, 3, before, picture, pane), pane);
    expect(after.x).toBeCloseTo(before.x, 6);
    expect(after.y).toBeCloseTo(before.y, 6);
  });
  it('cannot lose the picture, neither by panning nor by zooming', () => {
    const view = wholePicture(picture, pane);
    const gone = panned(view, 1e6, -1e6, picture);
    expect(gone.x).toBeLessThan(2000);
    expect(gone.y + gone.h).toBeGreaterThan(0);
    expect(pxPerScreen(zoomed(view, 1e9, { x: 5, y: 5 }, picture, pane), pane)).toBeCloseTo(1 / 24, 9);
  });
  it('keeps its middle and zoom when the pane changes', () => {
    const view = zoomed(wholePicture(picture, pane), 4, { x: 700, y: 300 }, picture, pane);
    const other = resized(view, pane, { width: 900, height: 300 });
    expect(pxPerScreen(other, { width: 900, height: 300 })).toBeCloseTo(pxPerScreen(view, pane), 9);
    expect(other.x + other.w / 2).toBeCloseTo(view.x + view.w / 2, 9);
  });
});

describe('picking in the picture', () => {
  const sentiments = [{ boxPx: { x: 0, y: 0, w: 100, h: 100 } }, { boxPx: { x: 40, y: 40, w: 10, h: 10 } }, { boxPx: { x: 200, y: 0, w: 50, h: 20 } }];
  it('takes the smallest box at a point, within reach', () => {
    expect(sentimentAt({ x: 45, y: 45 }, sentiments, 0)).toBe(1);
    expect(sentimentAt({ x: 5, y: 5 }, sentiments, 0)).toBe(0);
    expect(sentimentAt({ x: 195, y: 5 }, sentiments, 0)).toBeNull();
    expect(sentimentAt({ x: 195, y: 5 }, sentiments, 6)).toBe(2);
  });
  it('takes with a lasso what it goes round, not what it touches', () => {
    const lasso = [{ x: 35, y: 35 }, { x: 120, y: 35 }, { x: 120, y: 120 }, { x: 35, y: 120 }];
    expect(inLasso(lasso, sentiments)).toEqual([0, 1]);
    expect(inLasso(lasso.slice(0, 2), sentiments)).toEqual([]);
  });
  it('cuts right across a box', () => {
    expect(cutAcross({ x: 10, y: 20, w: 100, h: 50 }, 'upright', 0.25)).toEqual({ from: { x: 35, y: 16 }, to: { x: 35, y: 74 } });
    expect(cutAcross({ x: 10, y: 20, w: 100, h: 50 }, 'level', 0.5).from).toEqual({ x: 6, y: 45 });
  });
});

it('an outline becomes one closed path a ring', () => {
  expect(outlinePath({ rings: [[{ x: 0, y: 0 }, { x: 10.06, y: 0 }, { x: 0, y: 4 }], []] })).toBe('M0 0L10.1 0L0 4Z');
});

it('ruler ticks stand at whole units and are labelled where there is room', () => {
  const ticks = rulerTicks(0, 300, 10, 10, [1, 5, 10, 20, 50]);
  expect(ticks.filter((tick) => tick.label !== null).map((tick) => [tick.at, tick.label])).toEqual([[0, '0'], [50, '5'], [100, '10'], [150, '15'], [200, '20'], [250, '25'], [300, '30']]);
  expect(ticks).toHaveLength(31);
});

describe('undo', () => {
  it('goes back and forth step by step, and a new change ends what could be redone', () => {
    const history = createUndoHistory(0);
    history.change(1);
    history.change(2);
    expect([history.undo(), history.now.value, history.undo(), history.now.value, history.undo()]).toEqual([true, 1, true, 0, false]);
    history.redo();
    expect(history.now.value).toBe(1);
    history.change(7);
    expect(history.canRedo.value).toBe(false);
  });
  it('takes a gesture as one step', () => {
    const history = createUndoHistory(0);
    [1, 2, 3].forEach((value) => history.change(value, 'gap'));
    history.endGesture();
    history.change(4, 'gap');
    history.undo();
    expect(history.now.value).toBe(3);
    history.undo();
    expect(history.now.value).toBe(0);
  });
});
