/** Contrast ratio of two opaque colours `#RRGGBB`, 1 to 21, by the formula of WCAG 2.2 ("relative luminance"). */
export function contrastRatio(a: string, b: string): number {
  const [lighter, darker] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (lighter + 0.05) / (darker + 0.05);
}

function luminance(colour: string): number {
  const match = /^#([\da-f]{2})([\da-f]{2})([\da-f]{2})$/i.exec(colour);
  if (!match) throw new RangeError(`A colour is written #RRGGBB, not ${colour}.`);
  const [r, g, b] = match.slice(1).map((hex) => {
    const share = parseInt(hex, 16) / 255;
    return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}
