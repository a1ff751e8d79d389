import { fuzzReading } from './fuzz-reading';

/** No reading may take longer, in milliseconds. */
const longest = 20;

const count = Number(process.argv[2] ?? 1_000_000);
const seed = Number(process.argv[3] ?? 20_260_101);
const start = performance.now();
const { readings, read, faults, slowest } = fuzzReading(count, seed);
const seconds = (performance.now() - start) / 1000;

for (const fault of faults.slice(0, 20)) console.log(fault);
console.log(
  `${readings} strings in ${seconds.toFixed(1)} s, ${read} read, ${faults.length} faults; ` +
    `slowest ${slowest.milliseconds.toFixed(2)} ms: ${JSON.stringify(slowest.text.slice(0, 80))}`,
);
if (faults.length > 0 || slowest.milliseconds > longest) process.exitCode = 1;
