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

/** Linear red, green and blue of a colour. */
function linear(hex: string): readonly number[] {
  return [1, 3, 5]
    .map((at) => parseInt(hex.slice(at, at + 2), 16) / 255)
    .map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
}

/**
 * What full colour blindness makes of linear red, green and blue. Source: Machado, Oliveira, Fernandes, IEEE Trans. Vis.
 * Comput. Graph. 15, 1291 (2009), severity 1; the figures are from memory, each row checked to keep grey grey.
 */
const simulations = {
  'full colour vision': [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ],
  protanopia: [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  deuteranopia: [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  tritanopia: [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
} as const;

const times = (matrix: readonly (readonly number[])[], vector: readonly number[]): number[] =>
  matrix.map((row) => row.reduce((sum, each, index) => sum + each * (vector[index] ?? 0), 0));

/** Lightness and two opponent colours in which equal distances look about equal. Source: B. Ottosson, OKLab (2020). */
function oklab(rgb: readonly number[]): number[] {
  const cones = times(
    [
      [0.4122214708, 0.5363325363, 0.0514459929],
      [0.2119034982, 0.6806995451, 0.1073969566],
      [0.0883024619, 0.2817188376, 0.6299787005],
    ],
    rgb,
  ).map(Math.cbrt);
  return times(
    [
      [0.2104542553, 0.793617785, -0.0040720468],
      [1.9779984951, -2.428592205, 0.4505937099],
      [0.0259040371, 0.7827717662, -0.808675766],
    ],
    cones,
  );
}

/** How different two colours look, with 1 from black to white; 0.02 can just be told apart side by side. */
function difference(one: string, other: string, simulation: keyof typeof simulations): number {
  const [a, b] = [one, other].map((hex) => {
    const seen = times(simulations[simulation], linear(hex)).map((c) => Math.min(1, Math.max(0, c)));
    return oklab(seen);
  }) as [number[], number[]];
  return Math.hypot(...a.map((each, index) => each - (b[index] ?? 0)));
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

  it.each(Object.keys(simulations) as (keyof typeof simulations)[])('markers look different with %s', (simulation) => {
    for (const row of simulations[simulation]) expect(row[0] + row[1] + row[2]).toBeCloseTo(1, 5);
    const hues = [...markers, 'line'].map((name) => [name, colours.get(name) ?? ''] as const);
    const alike = hues.flatMap(([one, first], index) =>
      hues
        .slice(index + 1)
        .filter(([, second]) => difference(first, second, simulation) < 0.05)
        .map(([other]) => `${one} and ${other}`),
    );
    expect(alike).toEqual([]);
  });

  it.each(marks)('%s can be seen on %s', (mark, ground) => {
    expect(ratio(mark, ground)).toBeGreaterThanOrEqual(3);
  });
});
