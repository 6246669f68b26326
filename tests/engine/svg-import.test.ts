/** Sizes against SVG 2 and CSS Values (1 in = 96 px = 72 pt), closed forms for areas, and files that attack. */
import { describe, expect, it } from 'vitest';
import { cutLinesSvg } from '../../server/engine/fit/svg-export.ts';
import { importSvg, SvgImportError } from '../../server/engine/fit/svg-import.ts';
import { dieOutline, type DieGeometry } from '../../server/engine/fit/index.ts';
import { outlineArea, outlineBox } from '../../server/engine/geometry/ring.ts';

const svg = (body: string, head = 'width="100mm" height="100mm" viewBox="0 0 100 100"'): string => `<?xml version="1.0"?><svg xmlns="http://www.w3.org/2000/svg" ${head}>${body}</svg>`;
const only = (text: string) => {
  const { outlines } = importSvg(text);
  expect(outlines).toHaveLength(1);
  return { ...outlineBox(outlines[0]), area: outlineArea(outlines[0]) };
};
function codeOf(text: string, options = {}): string {
  try {
    importSvg(text, options);
  } catch (error) {
    if (!(error instanceof SvgImportError)) throw error;
    expect(error.message).toMatch(/^[A-Z“].{15,}[.]$/s);
    return error.code;
  }
  return 'taken';
}

describe('sizes of an imported drawing', () => {
  it.each([
    ['100mm', '0 0 100 100', 1], ['10cm', '0 0 100 100', 1], ['4in', '0 0 100 100', 1.016], ['288pt', '0 0 100 100', 1.016], ['384', '0 0 100 100', 1.016], ['384px', '0 0 100 100', 1.016], ['24pc', '0 0 100 100', 1.016], ['50mm', '0 0 200 200', 0.25],
  ])('width %s with viewBox %s: one unit is %d mm', (width, viewBox, mm) => {
    const box = only(svg('<rect x="10" y="20" width="40" height="30"/>', `width="${width}" height="${width}" viewBox="${viewBox}"`));
    expect(box.x).toBeCloseTo(10 * mm, 9);
    expect(box.w).toBeCloseTo(40 * mm, 9);
    expect(box.h).toBeCloseTo(30 * mm, 9);
  });

  it('takes 1/96 in where nothing is said, and says so', () => {
    const { outlines, warnings } = importSvg('<svg xmlns="http://www.w3.org/2000/svg"><rect width="96" height="48"/></svg>');
    expect(outlineBox(outlines[0]).w).toBeCloseTo(25.4, 9);
    expect(warnings.join()).toContain('1/96 in');
  });

  it('scales evenly into a box of another ratio, or stretches where that is asked for', () => {
    expect(only(svg('<rect width="50" height="50"/>', 'width="100mm" height="200mm" viewBox="0 0 50 50"'))).toMatchObject({ w: 100, h: 100 });
    expect(only(svg('<rect width="50" height="50"/>', 'width="100mm" height="200mm" viewBox="0 0 50 50" preserveAspectRatio="none"')).h).toBeCloseTo(200, 9);
  });

  it('adds up the transforms of groups, in their order', () => {
    const box = only(svg('<g transform="translate(10,20)"><g transform="rotate(90) scale(2)"><rect width="10" height="5" transform="translate(1 0)"/></g></g>'));
    // (1…11, 0…5) × 2 → turned by 90°: x −10…0, y 2…22 → moved.
    expect(box.x).toBeCloseTo(0, 9);
    expect(box.y).toBeCloseTo(22, 9);
    expect(box.w).toBeCloseTo(10, 9);
    expect(box.h).toBeCloseTo(20, 9);
    expect(only(svg('<rect width="10" height="10" transform="matrix(1 0 0 3 5 5) skewX(45)"/>')).w).toBeCloseTo(20, 9);
  });
});

describe('shapes of an imported drawing', () => {
  it.each([
    ['circle', '<circle cx="50" cy="50" r="20"/>', Math.PI * 400, 40], ['ellipse', '<ellipse cx="50" cy="50" rx="30" ry="10"/>', Math.PI * 300, 60],
    ['rounded rectangle', '<rect x="5" y="5" width="60" height="40" rx="10"/>', 2400 - (4 - Math.PI) * 100, 60],
    ['polygon', '<polygon points="0,0 30,0 30,20"/>', 300, 30], ['polyline that closes', '<polyline points="0 0 30 0 30 20 0 0"/>', 300, 30],
    ['arcs', '<path d="M30 50a20 20 0 1 0 40 0 20 20 0 1 0-40 0z"/>', Math.PI * 400, 40], ['arc flags without spaces', '<path d="M30 50a20 20 0 1140 0a20 20 0 11-40 0z"/>', Math.PI * 400, 40],
    ['arc with radii too small', '<path d="M10 50A1 1 0 0 1 50 50Z"/>', (Math.PI * 400) / 2, 40],
    // Four cubic curves with the usual 0.5523 are a circle to 0.03 %.
    ['cubic curves', '<path d="M50 30C61.046 30 70 38.954 70 50S61.046 70 50 70 30 61.046 30 50 38.954 30 50 30Z"/>', Math.PI * 400, 40],
    // A parabola's segment is two thirds of its box (Archimedes).
    ['quadratic curve', '<path d="M0 30Q15-30 30 30z"/>', (2 / 3) * 30 * 30, 30], ['smooth quadratic curves', '<path d="M0 20Q10 0 20 20T40 20V40H0Z"/>', 800, 40],
    ['relative lines', '<path d="m10 10h30v20h-30z"/>', 600, 30], ['a hole', '<path d="M0 0H40V40H0ZM10 10h20v20h-20z"/>', 1200, 40],
    ['CSS style transform', '<rect width="10" height="10" style="transform: scale(2)"/>', 400, 20],
  ])('%s', (_, body, area, width) => {
    const outline = only(svg(body));
    expect(Math.abs(outline.area / area - 1)).toBeLessThan(0.0015);
    expect(Math.abs(outline.w - width)).toBeLessThan(0.02);
  });

  it('keeps curves within 0.02 mm at any scale', () => {
    const [{ rings: [ring] }] = importSvg(svg('<circle cx="0" cy="0" r="1" transform="scale(80)"/>')).outlines;
    for (let i = 0; i < ring.length; i++) {
      const a = ring[i], b = ring[(i + 1) % ring.length];
      expect(80 - Math.hypot((a.x + b.x) / 2, (a.y + b.y) / 2)).toBeLessThan(0.02);
    }
  });

  it('leaves out what is not drawn, does not close, or is no outline, and says so', () => {
    const { outlines, warnings } = importSvg(svg('<defs><circle id="c" r="30"/></defs><g display="none"><rect width="9" height="9"/></g><path style="display:none" d="M0 0h9v9z"/><text>hello</text><use href="#c"/><path d="M0 0L50 0L50 50"/><rect width="0.2" height="0.2"/><rect width="20" height="20"/>'));
    expect(outlines).toHaveLength(1);
    expect(warnings).toHaveLength(4);
  });

  it('reads back what it wrote, at true size', () => {
    const dies: { name: string; geometry: DieGeometry }[] = [
      { name: 'Ticket <1>', geometry: { shape: { kind: 'notched', at: 'ends', widthMm: 70, heightMm: 35, notchRadiusMm: 5 } } },
      { name: 'Oval & co.', geometry: { shape: { kind: 'oval', widthMm: 80, heightMm: 50 }, stitchInsetMm: 2 } },
      { name: 'Tag', geometry: { shape: { kind: 'tag', widthMm: 90, heightMm: 40, shoulderMm: 10, holeMm: 5 } } },
    ];
    const text = cutLinesSvg(dies, { rowMm: 180 });
    const { outlines, warnings } = importSvg(text);
    expect(warnings).toEqual([]);
    dies.forEach(({ geometry }, i) => {
      const drawn = dieOutline(geometry), box = outlineBox(drawn), back = outlineBox(outlines[i]);
      expect(back.w).toBeCloseTo(box.w, 3);
      expect(back.h).toBeCloseTo(box.h, 3);
      expect(outlineArea(outlines[i])).toBeCloseTo(outlineArea(drawn), 0);
    });
    expect(text).toContain('<title>Ticket &lt;1&gt;</title>');
    expect(importSvg(cutLinesSvg(dies, { stitchLines: true })).outlines).toHaveLength(4);
  });
});

describe('files that are not to be trusted', () => {
  const good = '<rect width="20" height="20"/>';
  it.each([
    ['a script', svg(`<script>alert(1)</script>${good}`), 'script'],
    ['a script in a namespace', svg(`<x:script xmlns:x="http://www.w3.org/2000/svg">1</x:script>${good}`), 'script'],
    ['an event handler', svg('<rect width="20" height="20" onload="alert(1)"/>'), 'event-handler'],
    ['entities that expand', `<!DOCTYPE svg [<!ENTITY a "aaaa"><!ENTITY b "&a;&a;&a;&a;">]>${svg(good)}`.replace('<?xml version="1.0"?>', ''), 'doctype'],
    ['an outside entity', `<!DOCTYPE svg SYSTEM "file:///etc/passwd">${svg(good)}`.replace('<?xml version="1.0"?>', ''), 'doctype'],
    ['an unknown entity', svg(`<title>&x;</title>${good}`), 'not-xml'],
    ['an outside picture', svg(`<image href="http://example.invalid/a.png" width="9" height="9"/>${good}`), 'outside-reference'],
    ['a picture within', svg(`<image xlink:href="data:image/png;base64,AAAA" xmlns:xlink="http://www.w3.org/1999/xlink"/>${good}`), 'outside-reference'],
    ['a link that runs', svg(`<a href="javascript:alert(1)">${good}</a>`), 'outside-reference'],
    ['an outside use', svg(`<use href="other.svg#x"/>${good}`), 'outside-reference'],
    ['an outside style', svg(`<style>@import "http://example.invalid/x.css";</style>${good}`), 'outside-reference'],
    ['an outside fill', svg('<rect width="20" height="20" style="fill:url(http://example.invalid/#g)"/>'), 'outside-reference'],
    ['a style sheet', `<?xml-stylesheet href="x.css"?>${svg(good).replace('<?xml version="1.0"?>', '')}`, 'outside-reference'],
    ['a web page inside', svg(`<foreignObject><p xmlns="http://www.w3.org/1999/xhtml">x</p></foreignObject>${good}`), 'foreign-content'],
    ['10⁶ points', svg(`<path d="M0 0${'h1v1h-1v-1'.repeat(250_000)}z"/>`), 'too-many-points'],
    ['10⁶ corners', svg(`<polygon points="${'1,2 '.repeat(1_000_000)}"/>`), 'too-many-points'],
    ['a curve as large as a house', svg('<circle r="1e9"/>'), 'out-of-range'],
    ['no numbers', svg('<path d="M NaN 0L5 5z"/>'), 'bad-number'],
    ['too large numbers', svg('<path d="M0 0L1e999 5z"/>'), 'bad-number'],
    ['no lengths', svg('<rect width="NaN" height="20"/>'), 'bad-length'],
    ['no path', svg('<path d="L5 5z"/>'), 'bad-path'],
    ['an unknown command', svg('<path d="M0 0X5 5z"/>'), 'bad-path'],
    ['no transform', svg('<rect width="20" height="20" transform="grow(2)"/>'), 'bad-transform'],
    ['deep nesting', svg(`${'<g>'.repeat(5000)}${good}${'</g>'.repeat(5000)}`), 'too-deep'],
    ['very many elements', svg('<g/>'.repeat(60_000)), 'too-many-elements'],
    ['an unfinished file', svg(good).slice(0, -8), 'not-xml'],
    ['a web page', '<html><body/></html>', 'foreign-content'],
    ['another XML', '<feed/>', 'not-svg'],
    ['nothing', '', 'not-xml'],
    ['nothing drawn', svg('<text>only words</text>'), 'no-outlines'],
  ])('refuses %s in words', (_, text, code) => {
    expect(codeOf(text)).toBe(code);
  });

  it('refuses a file that is too long before it reads it', () => expect(codeOf(svg(good), { maxLength: 50 })).toBe('too-large'));

  it('takes references that stay inside', () => {
    expect(codeOf(svg(`<defs><linearGradient id="g"/></defs><rect width="20" height="20" fill="url(#g)"/>`))).toBe('taken');
  });
});
