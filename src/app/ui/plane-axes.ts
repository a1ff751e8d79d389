import { linearScale, type Tick } from './tolerance-ruler/ruler-scale';

/** The ticks of an axis that ends exactly where a picture ends; few, so that they fit a small one. */
export function axisTicks(low: number, high: number, from: number, to: number, most = 5): readonly Tick[] {
  const place = (value: number) => from + ((value - low) / (high - low)) * (to - from);
  const all = linearScale([low, high], from, to).ticks.flatMap(({ text }) => {
    const value = Number(text.replace('−', '-'));
    return Number.isFinite(value) && value >= low && value <= high ? [{ at: place(value), text }] : [];
  });
  const zero = all.findIndex(({ text }) => Number(text) === 0);
  const every = Math.max(1, Math.ceil(all.length / most));
  return all.filter((_, index) => (index - Math.max(0, zero)) % every === 0);
}
