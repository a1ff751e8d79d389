/// <reference types="node" />
import { readFileSync } from 'node:fs';
import { join } from 'node:path';

const source = readFileSync(join(process.cwd(), 'src/styles/tokens.scss'), 'utf8');

/** The colours of one scheme, as written in the file that ships. */
function scheme(name: 'light' | 'dark'): ReadonlyMap<string, string> {
  const body = new RegExp(`@mixin ${name} \\{([^}]*)\\}`).exec(source)?.[1] ?? '';
  return new Map([...body.matchAll(/--([a-z0-9-]+): (#[0-9a-f]{6});/g)].map((m) => [m[1] ?? '', m[2] ?? '']));
}

/** Relative luminance of a colour. Source: WCAG 2.2, "relative luminance". */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5]
    .map((at) => parseInt(hex.slice(at, at + 2), 16) / 255)
    .map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4)) as [number, number, number];
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

/** Contrast ratio of two colours, 1 to 21. Source: WCAG 2.2, "contrast ratio". */
function contrast(one: string, other: string): number {
  const [light, dark] = [luminance(one), luminance(other)].sort((a, b) => b - a) as [number, number];
  return (light + 0.05) / (dark + 0.05);
}

const grounds = ['paper', 'bench', 'field'];
const tones = ['right', 'ft', 'slip', 'wrong'];
const markers = ['m1', 'm2', 'm3', 'm4', 'm5', 'm6', 'm7', 'm8'];

/** Words on their ground, at least 4.5 to 1. */
const words: readonly (readonly [string, string])[] = [
  ...grounds.flatMap((ground) => ['ink', 'silver-4', 'line', ...tones].map((text) => [text, ground] as const)),
  ...tones.map((tone) => [tone, `${tone}-wash`] as const),
  ...['line', 'ink', 'silver-4'].map((text) => [text, 'line-wash'] as const),
  ...['slip-wash', 'right-wash', 'wrong-wash', 'ft-wash', 'silver-1'].map((ground) => ['ink', ground] as const),
  ['silver-4', 'silver-1'],
  ['on-line', 'line'],
  ...markers.map((marker) => ['paper', marker] as const),
];

/** Edges and marks, at least 3 to 1. */
const marks: readonly (readonly [string, string])[] = grounds.flatMap((ground) =>
  ['edge', 'line', 'w-neg', 'w-pos', ...markers].map((mark) => [mark, ground] as const),
);

describe.each(['light', 'dark'] as const)('tokens, %s', (name) => {
  const colours = scheme(name);
  const ratio = (one: string, other: string) => contrast(colours.get(one) ?? '', colours.get(other) ?? '');

  it('knows black on white', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10);
  });

  it.each(words)('%s can be read on %s', (text, ground) => {
    expect(ratio(text, ground)).toBeGreaterThanOrEqual(4.5);
  });

  it.each(marks)('%s can be seen on %s', (mark, ground) => {
    expect(ratio(mark, ground)).toBeGreaterThanOrEqual(3);
  });
});
