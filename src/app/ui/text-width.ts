/**
 * About how wide a few words are in the interface's type, in pixels: enough to keep labels of a drawing apart without
 * measuring them. Widths of Atkinson Hyperlegible Next, measured at 12 px; wide capitals err on the safe side.
 */
export function textWidth(text: string, size = 12, weight: 400 | 600 = 400): number {
  let ems = 0;
  for (const c of text) {
    if (/[ilIj|.,:;'’!()[\]]/.test(c)) ems += 0.3;
    else if (/[mwMW@%—]/.test(c)) ems += 0.86;
    else if (c === ' ') ems += 0.26;
    else ems += 0.56;
  }
  return ems * size * (weight === 600 ? 1.05 : 1);
}
