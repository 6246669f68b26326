/**
 * Colours of both appearances, the one place where they are written. vite.config.ts puts them into the page as CSS variables
 * (`--ink`, `--sheet` …), so that the first paint is right; naive.ts hands them to Naive UI.
 *
 * A print-shop sheet on a bright table: paper, one strong ink, fine ruled lines. Every text colour keeps 4.5:1 on the three
 * grounds it may stand on, every control's edge 3:1 (WCAG 2.2, 1.4.3 and 1.4.11); tests/client/contrast.test.ts measures it.
 */
export interface Tokens {
  /** Ground of the page; of cards, tables and the run sheet; of hovered and selected rows. */
  paper: string; sheet: string; wash: string;
  /** Lines and grids, which only divide. Edges of fields and handles, which must be seen. */
  rule: string; edge: string;
  /** Text and primary buttons; text of second rank; text on an ink ground. */
  ink: string; soft: string; onInk: string;
  inkHover: string; inkPressed: string;
  /** Accent, selection, what needs a hand. */
  madder: string; madderWash: string;
  /** Done, good. */
  verdigris: string; verdigrisWash: string;
  /** Snug, waiting. */
  ochre: string; ochreWash: string;
  /** Shadow of what floats; nothing else has one. */
  shade: string;
}

export const light: Tokens = {
  paper: '#FAF7F2', sheet: '#FFFFFF', wash: '#E9EDF4',
  rule: '#DED6C8', edge: '#8A8172',
  ink: '#22304A', soft: '#56607A', onInk: '#FFFFFF',
  inkHover: '#33456A', inkPressed: '#162238',
  madder: '#AF3248', madderWash: '#FBEDEE',
  verdigris: '#22665A', verdigrisWash: '#E8F3F0',
  ochre: '#85530C', ochreWash: '#FAF0DF',
  shade: 'rgba(34, 48, 74, 0.18)',
};

export const dark: Tokens = {
  paper: '#161A23', sheet: '#1E2430', wash: '#2B3547',
  rule: '#3A4356', edge: '#7F899F',
  ink: '#E9E5DB', soft: '#B0B8C9', onInk: '#161A23',
  inkHover: '#FFFFFF', inkPressed: '#CFCABD',
  madder: '#F394A2', madderWash: '#3B2630',
  verdigris: '#74CBB9', verdigrisWash: '#1F3636',
  ochre: '#E6B366', ochreWash: '#382F20',
  shade: 'rgba(0, 0, 0, 0.55)',
};

/** CSS for the page's head. Without a choice the system decides; `data-appearance` on the root is the person's choice. */
export function tokenStyles(): string {
  const lightVariables = variables(light), darkVariables = variables(dark);
  return [
    `:root{color-scheme:light;${lightVariables}}`,
    `@media (prefers-color-scheme:dark){:root:not([data-appearance=light]){color-scheme:dark;${darkVariables}}}`,
    `:root[data-appearance=dark]{color-scheme:dark;${darkVariables}}`,
    // Print-outs are ink on paper whatever the screen shows.
    `@media print{:root:root:root{color-scheme:light;${lightVariables}}}`,
  ].join('\n');
}

function variables(tokens: Tokens): string {
  return Object.entries(tokens)
    .map(([name, value]) => `--${name.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}:${value}`)
    .join(';');
}
