// `npm run bench:keys`: how fast keys are. Every ratio is of two times measured in this run, one beside the other.
import { spawn, spawnSync } from 'node:child_process';
import { cpus } from 'node:os';
import { fileURLToPath } from 'node:url';
import { compileKey } from '../server/keys/compile-key';
import { evaluateState, readGivens } from '../server/keys/evaluate-key';
import { createKeyPool } from '../server/keys/key-pool';
import { KeyEvaluator, type KeyRequest } from '../server/keys/key-task';
import { defaultConvention } from '../server/optics/convention';
import { figureByMethods } from '../server/optics/figure-by-methods';
import { figureFunctions } from '../server/optics/figures';
import { wignerOnPoints } from '../server/optics/phase-space/wigner-pictures';
import { stateFunctions } from '../server/optics/states';
import { kinds, workload, type WorkloadKey } from './keys/workload';

const convention = defaultConvention;
const variants = 300;
const keys = workload(variants);
const request = ({ expression, givens }: WorkloadKey): KeyRequest => ({ expression, givens, convention });
const verdict = (isMet: boolean): string => (isMet ? 'met' : 'MISSED');
const quantile = (sorted: readonly number[], part: number): number => sorted[Math.floor(sorted.length * part)] ?? 0;
const meanOf = (times: readonly number[]): number => times.reduce((sum, time) => sum + time, 0) / times.length;
const median = (times: readonly number[]): number =>
  quantile(
    [...times].sort((a, b) => a - b),
    0.5,
  );

/** What this process has taken of all processors, in milliseconds: it does not count what others take of them. */
function processorTime(): number {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
}

/** The time of an act in milliseconds. */
function timed(act: () => void): number {
  const began = performance.now();
  act();
  return performance.now() - began;
}

console.log(
  `Node.js ${process.version}, ${String(cpus().length)} × ${cpus()[0]?.model.trim() ?? 'unknown processor'}\n`,
);

measureWorkload();
measureClosedForms();
measurePicture();
await measurePool();
await measureAgainstQutip();

function measureWorkload(): void {
  console.log(
    `${String(kinds.length)} kinds × ${String(variants)} variants, both methods and their agreement, one process`,
  );
  const evaluator = new KeyEvaluator();
  for (const key of workload(variants, 7).flat()) evaluator.evaluate(request(key));
  const all: number[] = [];
  const begun = processorTime();
  for (const [index, own] of keys.entries()) {
    const times: number[] = [];
    let refused = 0;
    const before = processorTime();
    for (const key of own) {
      times.push(
        timed(() => {
          if (evaluator.evaluate(request(key)).fault) refused += 1;
        }),
      );
    }
    const processorTimeEach = (processorTime() - before) / own.length;
    all.push(...times);
    const sorted = times.sort((a, b) => a - b);
    console.log(
      `  ${(kinds[index]?.name ?? '').padEnd(40)} mean ${meanOf(sorted).toFixed(3)} ms (processor ${processorTimeEach.toFixed(3)} ms), 99 % below ${quantile(sorted, 0.99).toFixed(2)} ms` +
        (refused > 0 ? `, ${String(refused)} refused` : ''),
    );
  }
  const processorTimeOfAll = processorTime() - begun;
  const [mean, tail] = [
    meanOf(all),
    quantile(
      all.sort((a, b) => a - b),
      0.99,
    ),
  ];
  console.log(
    `  mean ${mean.toFixed(3)} ms (goal 0.3 ms: ${verdict(mean < 0.3)}); processor time ${(processorTimeOfAll / all.length).toFixed(3)} ms`,
  );
  console.log(`  99th percentile ${tail.toFixed(2)} ms (goal 5 ms: ${verdict(tail < 5)})\n`);
}

/** One method, its description made anew for each variant, beside the formula in plain TypeScript. */
function measureClosedForms(): void {
  console.log('one method beside the bare closed form (goal: at most 20 times)');
  const poisson = (mean: number, n: number): number => {
    let value = Math.exp(-mean);
    for (let k = 1; k <= n; k++) value *= mean / k;
    return value;
  };
  const thermal = (mean: number, n: number): number => (mean / (1 + mean)) ** n / (1 + mean);
  const binomial = (n: number, k: number, p: number): number => {
    let value = 1;
    for (let j = 1; j <= k; j++) value *= ((n - k + j) / j) * p;
    return value * (1 - p) ** (n - k);
  };
  const rows = [
    {
      name: 'P(n) of coherent light',
      figure: (x: number, n: number) => figureFunctions.photonProbability([stateFunctions.coherent([Math.sqrt(x)]), n]),
      bare: poisson,
    },
    {
      name: 'P(n) of thermal light',
      figure: (x: number, n: number) => figureFunctions.photonProbability([stateFunctions.thermal([x]), n]),
      bare: thermal,
    },
    {
      name: 'P(k) of a number state after loss',
      figure: (x: number, n: number) =>
        figureFunctions.photonProbability([stateFunctions.lose([stateFunctions.fock([20]), x / 30]), n]),
      bare: (x: number, n: number) => binomial(20, n, x / 30),
    },
  ];
  for (const { name, figure, bare } of rows) {
    const inputs = Array.from({ length: 2_000 }, (_, k) => [1 + (k % 97) / 10, k % 20] as const);
    let sum = 0;
    const engine = (): void => {
      for (const [x, n] of inputs) {
        const [outcome] = figureByMethods(figure(x, n), { methods: ['number basis'] });
        if (outcome && 'value' in outcome && typeof outcome.value === 'number') sum += outcome.value;
      }
    };
    const formula = (): void => {
      for (const [x, n] of inputs) sum -= bare(x, n);
    };
    const [engines, formulas] = [engine, formula].map((act) => {
      for (let k = 0; k < 5; k++) act();
      return median(Array.from({ length: 15 }, () => timed(act)));
    });
    const ratio = (engines ?? 0) / (formulas ?? 1);
    console.log(
      `  ${name.padEnd(40)} ${((1000 * (engines ?? 0)) / inputs.length).toFixed(2)} µs beside ${((1000 * (formulas ?? 0)) / inputs.length).toFixed(2)} µs: ${ratio.toFixed(1)} times (${verdict(ratio <= 20)})` +
        (Math.abs(sum) > 1e-6 ? ' — they differ!' : ''),
    );
  }
  console.log('');
}

function measurePicture(): void {
  const axis = Float64Array.from({ length: 200 }, (_, k) => -6 + (12 * k) / 199);
  const draw = (eta: number): void => {
    const compiled = compileKey('lose(cat(2), eta)', { names: ['eta'] });
    wignerOnPoints(evaluateState(compiled, readGivens({ eta })), axis, axis);
  };
  draw(0.7);
  draw(0.75);
  const time = median(Array.from({ length: 9 }, (_, k) => timed(() => draw(0.8 + k / 100))));
  console.log(
    `Wigner picture of a lossy cat, 200 × 200 points: ${time.toFixed(1)} ms (goal 30 ms: ${verdict(time < 30)})\n`,
  );
}

async function measurePool(): Promise<void> {
  const requests = Array.from({ length: 3 }, () => keys.flat())
    .flat()
    .map(request);
  const busy: number[][] = [[], []];
  const rate = async (size: number): Promise<number> => {
    const pool = createKeyPool({ size });
    await pool.evaluateMany(workload(variants, 7).flat().map(request));
    const began = performance.now();
    const before = processorTime();
    await pool.evaluateMany(requests);
    const taken = performance.now() - began;
    busy[size - 1]?.push((processorTime() - before) / taken);
    await pool.close();
    return requests.length / taken;
  };
  const ratios: number[] = [];
  for (let round = 0; round < 3; round++) {
    const one = await rate(1);
    ratios.push((await rate(2)) / one);
  }
  const ratio = median(ratios);
  console.log(`two workers beside one: ${ratio.toFixed(2)} times the rate (goal 1.6: ${verdict(ratio >= 1.6)})`);
  // On a machine that does other work too there are fewer than two processors to be had.
  const [one, two] = busy.map((shares) => median(shares).toFixed(2));
  console.log(`  processors they got: ${two ?? ''} for two workers, ${one ?? ''} for one\n`);
}

/** The same keys in QuTiP, the start of each process included. */
async function measureAgainstQutip(): Promise<void> {
  const python = ['/usr/bin/python3', 'python3'].find(
    (command) => spawnSync(command, ['-c', 'import qutip'], { stdio: 'ignore' }).status === 0,
  );
  if (python === undefined) {
    console.log('QuTiP is not installed (Debian: apt-get install python3-qutip); the comparison is left out.');
    return;
  }
  const perKind = 10;
  const few = keys.flatMap((own, kind) => own.slice(0, perKind).map((key) => ({ kind, ...key })));
  const many = keys.flat();
  const script = fileURLToPath(new URL('./keys/keys-qutip.py', import.meta.url));
  const theirs = await rateOf(python, [script], few);
  const ours = await rateOf('npm', ['run', '--silent', 'key'], many);
  const ratio = ours.rate / theirs.rate;
  console.log(`process start included: ${ours.rate.toFixed(0)} keys a second (${String(many.length)} keys)`);
  console.log(
    `  QuTiP ${theirs.rate.toFixed(2)} keys a second (${String(few.length)} of the same keys, ${String(perKind)} of each kind)`,
  );
  console.log(`  ${ratio.toFixed(0)} times (goal 100: ${verdict(ratio >= 100)})`);
  // Both have computed the same things: the largest difference says how well QuTiP's basis did.
  const evaluator = new KeyEvaluator();
  const differences = few.map((key, index) => {
    const value = evaluator.evaluate(request(key)).key?.value;
    return typeof value === 'number' ? Math.abs(value - Number(theirs.lines[index])) : NaN;
  });
  console.log(`  largest difference of a value: ${Math.max(...differences).toExponential(0)}`);
}

async function rateOf(
  command: string,
  args: readonly string[],
  lines: readonly object[],
): Promise<{ readonly rate: number; readonly lines: readonly string[] }> {
  const began = performance.now();
  const child = spawn(command, args, {
    stdio: ['pipe', 'pipe', 'inherit'],
    env: { ...process.env, OMP_NUM_THREADS: '1' },
  });
  let text = '';
  child.stdout.setEncoding('utf8').on('data', (chunk: string) => (text += chunk));
  child.stdin.end(lines.map((line) => `${JSON.stringify(line)}\n`).join(''));
  await new Promise((resolve) => child.on('close', resolve));
  const seconds = (performance.now() - began) / 1000;
  const given = text
    .trim()
    .split('\n')
    .filter((line) => !line.startsWith('Calibrating'));
  if (given.length !== lines.length)
    throw new Error(`${command} gave ${String(given.length)} values for ${String(lines.length)} keys`);
  return { rate: lines.length / seconds, lines: given };
}
