/**
 * Lines on a drawn sheet. Card keeps its own colour in either appearance of the page, so what is drawn on it goes by the card: dark
 * lines on light card, light ones on dark. Pure.
 */
import { contrastRatio } from '../../theme/contrast.ts';
import { dark, light } from '../../theme/tokens.ts';

export interface PaperColours { card: string; line: string; soft: string; accent: string }

export function paperColours(card: string | null | undefined): PaperColours {
  const colour = card ?? light.sheet;
  const tokens = contrastRatio(colour, light.ink) >= contrastRatio(colour, dark.ink) ? light : dark;
  return { card: colour, line: tokens.ink, soft: tokens.soft, accent: tokens.madder };
}
