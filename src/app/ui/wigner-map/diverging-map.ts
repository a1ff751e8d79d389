/** Red, green and blue, 0 to 255. */
export type Colour = readonly [number, number, number];

/** The colours of a map around zero. */
export interface MapColours {
  readonly negative: Colour;
  readonly zero: Colour;
  readonly positive: Colour;
}

/** Reads `#rrggbb`; undefined for anything else. */
export function readColour(text: string): Colour | undefined {
  const match = /^#([0-9a-f]{2})([0-9a-f]{2})([0-9a-f]{2})$/i.exec(text.trim());
  if (!match) return undefined;
  return [parseInt(match[1] ?? '', 16), parseInt(match[2] ?? '', 16), parseInt(match[3] ?? '', 16)];
}

/** The colour of a value between −1 and 1: from zero's colour to one end's, in steps that look even. */
export function colourOf(value: number, { negative, zero, positive }: MapColours): Colour {
  const end = value < 0 ? negative : positive;
  const part = Math.min(1, Math.abs(value)) ** 0.9;
  const mix = (index: 0 | 1 | 2) => Math.round(zero[index] + (end[index] - zero[index]) * part);
  return [mix(0), mix(1), mix(2)];
}

/** A picture's pixels, top row first, of values that run row by row from the lowest. */
export function pixelsOf(
  values: readonly number[],
  points: number,
  full: number,
  colours: MapColours,
): Uint8ClampedArray<ArrayBuffer> {
  const pixels = new Uint8ClampedArray(points * points * 4);
  for (let row = 0; row < points; row++) {
    for (let column = 0; column < points; column++) {
      const [red, green, blue] = colourOf((values[row * points + column] ?? 0) / full, colours);
      const at = ((points - 1 - row) * points + column) * 4;
      pixels.set([red, green, blue, 255], at);
    }
  }
  return pixels;
}
