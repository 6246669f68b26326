import { describe, expect, it } from 'vitest';
import { contrastRatio } from '../../src/theme/contrast.ts';
import { dark, light, tokenStyles } from '../../src/theme/tokens.ts';
import type { Tokens } from '../../src/theme/tokens.ts';

/** WCAG 2.2, success criteria 1.4.3 (text) and 1.4.11 (parts of controls). */
const TEXT = 4.5, CONTROL = 3;
const grounds = ['paper', 'sheet', 'wash'] as const;

describe.each([['light', light], ['dark', dark]] as [string, Tokens][])('%s appearance', (_name, tokens) => {
  it.each(['ink', 'soft', 'madder', 'verdigris', 'ochre'] as const)('%s is readable as text on every ground', (colour) => {
    for (const ground of grounds) expect(contrastRatio(tokens[colour], tokens[ground]), `${colour} on ${ground}`).toBeGreaterThanOrEqual(TEXT);
  });

  it.each(['madder', 'verdigris', 'ochre'] as const)('%s and ink are readable on its own tint', (colour) => {
    for (const text of [tokens[colour], tokens.ink]) expect(contrastRatio(text, tokens[`${colour}Wash`])).toBeGreaterThanOrEqual(TEXT);
  });

  it('text on a primary button is readable in every state of the button', () => {
    for (const ground of [tokens.ink, tokens.inkHover, tokens.inkPressed]) expect(contrastRatio(tokens.onInk, ground)).toBeGreaterThanOrEqual(TEXT);
  });

  it('edges of fields stand out from every ground', () => {
    for (const ground of grounds) expect(contrastRatio(tokens.edge, tokens[ground]), ground).toBeGreaterThanOrEqual(CONTROL);
  });
});

describe('contrast', () => {
  it('is 21 for black on white, as WCAG says', () => expect(contrastRatio('#000000', '#FFFFFF')).toBeCloseTo(21, 5));
  it('is 4.54 for grey #767676 on white (WCAG technique G18: the lightest grey that passes)', () => expect(contrastRatio('#767676', '#FFFFFF')).toBeCloseTo(4.54, 2));
});

describe('styles of the page', () => {
  it('give every token of both appearances as a CSS variable', () => {
    const css = tokenStyles();
    for (const value of [...Object.values(light), ...Object.values(dark)]) expect(css).toContain(value);
    expect(css).toContain(`--madder-wash:${light.madderWash}`);
  });
});
