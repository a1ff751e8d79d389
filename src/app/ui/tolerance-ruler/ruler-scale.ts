import { printNumber, superscript } from '@shared/reading/print';

/** A tick of an axis. */
export interface Tick {
  readonly at: number;
  readonly text: string;
}

/** An axis that turns values into pixels. */
export interface RulerScale {
  readonly kind: 'linear' | 'logarithmic';
  readonly place: (value: number) => number;
  readonly ticks: readonly Tick[];
}

/** Values further apart than this factor stand on a logarithmic axis. */
const widestLinear = 30;

/**
 * Chooses the axis for values that all have to be on it: linear, or logarithmic where they share a sign and span more than a
 * factor 30.
 */
export function chooseScale(values: readonly number[], from: number, to: number): RulerScale {
  const finite = values.filter(Number.isFinite);
  const sizes = finite.map(Math.abs).filter((size) => size > 0);
  const sameSign = finite.every((value) => value > 0) || finite.every((value) => value < 0);
  if (sameSign && sizes.length > 1 && Math.max(...sizes) / Math.min(...sizes) > widestLinear) {
    return logarithmicScale(Math.min(...sizes), Math.max(...sizes), from, to, (finite[0] ?? 1) < 0);
  }
  return linearScale(finite, from, to);
}

/** A linear axis with about six round ticks; zero is on it where it is near. */
export function linearScale(values: readonly number[], from: number, to: number): RulerScale {
  let low = Math.min(...values);
  let high = Math.max(...values);
  if (values.length === 0 || (low === 0 && high === 0)) [low, high] = [-1, 1];
  if (low > 0 && low < (high - low) * 0.6) low = 0;
  if (high < 0 && -high < (high - low) * 0.6) high = 0;
  const spread = high - low || Math.abs(high) || 1;
  const margin = high === low ? 0.5 * spread : 0.06 * spread;
  if (low !== 0) low -= margin;
  if (high !== 0) high += margin;

  const step = roundStep((high - low) / 6);
  const decimals = Math.max(0, -Math.floor(Math.log10(step)));
  const place = (value: number) => from + ((value - low) / (high - low)) * (to - from);
  const ticks: Tick[] = [];
  for (let index = Math.ceil(low / step - 1e-9); index * step <= high + step * 1e-9; index++) {
    const value = index * step;
    const tooFar = decimals > 5 || Math.abs(value) >= 1e6;
    ticks.push({
      at: place(value),
      text: tooFar ? printNumber(Number(value.toPrecision(6)), 4) : value.toFixed(decimals).replace('-', '−'),
    });
  }
  return { kind: 'linear', place, ticks };
}

/** A logarithmic axis over whole decades; for negative values it runs from the larger size to the smaller. */
export function logarithmicScale(
  smallest: number,
  largest: number,
  from: number,
  to: number,
  negative = false,
): RulerScale {
  const low = Math.floor(Math.log10(smallest) - 0.02);
  const high = Math.max(low + 1, Math.ceil(Math.log10(largest) + 0.02));
  const along = (size: number) => (Math.log10(size) - low) / (high - low);
  const place = (value: number) => {
    const share = Math.min(1, Math.max(0, along(Math.abs(value) || Number.MIN_VALUE)));
    return from + (negative ? 1 - share : share) * (to - from);
  };
  const every = Math.ceil((high - low) / 8);
  const ticks: Tick[] = [];
  for (let power = low; power <= high; power += every) {
    const sign = negative ? '−' : '';
    const plain: Readonly<Record<number, string>> = { [-2]: '0.01', [-1]: '0.1', 0: '1', 1: '10', 2: '100' };
    ticks.push({
      at: place((negative ? -1 : 1) * 10 ** power),
      text: `${sign}${plain[power] ?? `10${superscript(power)}`}`,
    });
  }
  return { kind: 'logarithmic', place, ticks };
}

const ratios: readonly (readonly [number, string])[] = [
  [1 / 64, '1/64'],
  [1 / 32, '1/32'],
  [1 / 16, '1/16'],
  [1 / 8, '⅛'],
  [1 / 4, '¼'],
  [1 / 2, '½'],
  [1, '1'],
  [2, '2'],
  [4, '4'],
  [8, '8'],
  [16, '16'],
  [32, '32'],
  [64, '64'],
];

/**
 * The axis answer ÷ key in powers of two, at least from ½ to 2 and at most from 1/64 to 64; what lies beyond, and what has
 * the wrong sign, stands at its end. A long axis names every second power.
 */
export function ratioScale(values: readonly number[], from: number, to: number): RulerScale {
  const powers = values.filter((value) => value > 0 && Number.isFinite(value)).map(Math.log2);
  const low = Math.max(-6, Math.min(-1, Math.floor(Math.min(0, ...powers) - 0.05)));
  const high = Math.min(6, Math.max(1, Math.ceil(Math.max(0, ...powers) + 0.05)));
  const place = (value: number) => {
    const share = value > 0 ? (Math.log2(value) - low) / (high - low) : 0;
    return from + Math.min(1, Math.max(0, share)) * (to - from);
  };
  const every = high - low > 7 ? 2 : 1;
  const ticks = ratios
    .filter(([ratio]) => Math.log2(ratio) >= low && Math.log2(ratio) <= high)
    .map(([ratio, text]) => ({ at: place(ratio), text: Math.log2(ratio) % every === 0 ? text : '' }));
  return { kind: 'logarithmic', place, ticks };
}

/** The next of 1, 2, 5 × 10ⁿ that is not smaller. */
function roundStep(rough: number): number {
  const power = 10 ** Math.floor(Math.log10(rough));
  const lead = rough / power;
  return (lead <= 1 ? 1 : lead <= 2 ? 2 : lead <= 5 ? 5 : 10) * power;
}
