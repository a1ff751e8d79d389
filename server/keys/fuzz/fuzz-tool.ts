import { defaultConvention } from '../../optics/convention';
import { createKeyPool } from '../key-pool';
import { fuzzExpressions } from './fuzz-expressions';
import { objectionTo } from './judge-outcome';

// `npm run fuzz:keys -- 1000000 7`: how many expressions, and the seed.
const [count = 1_000_000, seed = 1] = process.argv.slice(2).map(Number);
const givens = { nbar: 2.5, eta: 0.6, alpha: { re: 1, im: 0.5 } };
const pool = createKeyPool({});
const began = Date.now();
let done = 0;
let values = 0;
let timeouts = 0;
let objections = 0;
let batch: string[] = [];

async function judge(): Promise<void> {
  const outcomes = await pool.evaluateMany(
    batch.map((expression) => ({ expression, givens, convention: defaultConvention })),
  );
  for (const [index, outcome] of outcomes.entries()) {
    if (outcome.key) values += 1;
    else if (outcome.fault.message.includes('longer than two seconds')) timeouts += 1;
    const objection = objectionTo(outcome);
    if (!objection) continue;
    objections += 1;
    console.log(`${batch[index] ?? ''}\n  ${objection}`);
  }
  done += batch.length;
  batch = [];
  if (done % 100_000 === 0)
    console.log(`${String(done)} expressions, ${String(Math.round((Date.now() - began) / 1000))} s`);
}

for (const expression of fuzzExpressions(seed, count)) {
  batch.push(expression);
  if (batch.length === 5_000) await judge();
}
await judge();
await pool.close();
console.log(
  `${String(done)} expressions: ${String(values)} values, ${String(done - values)} refused in a sentence, ${String(timeouts)} of them stopped after two seconds; ${String(objections)} wrong`,
);
process.exitCode = objections > 0 ? 1 : 0;
