/** How often each number of counts came, from 0 to the largest. */
export function tallyOf(counts: readonly number[]): readonly { readonly count: number; readonly times: number }[] {
  const times = new Map<number, number>();
  for (const count of counts) times.set(count, (times.get(count) ?? 0) + 1);
  // Very bright light would make a table of mostly zeros: gaps are left out there.
  const largest = counts.reduce((most, count) => Math.max(most, count), 0);
  const all =
    largest < 100 ? Array.from({ length: largest + 1 }, (_, count) => count) : [...times.keys()].sort((a, b) => a - b);
  return all.map((count) => ({ count, times: times.get(count) ?? 0 }));
}

/** Every shot on its line, with a heading (RFC 4180). */
export function countsAsCsv(name: string, counts: readonly number[]): string {
  return [`shot,${name}`, ...counts.map((count, index) => `${String(index + 1)},${String(count)}`), ''].join('\r\n');
}
