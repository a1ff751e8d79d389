/**
 * How well patterns tell the mistakes that students made: `npm run bench:patterns`. The simulated students of the
 * demonstration answer every problem of its course, each in a variant of their own; what they did wrong is known. Answers
 * are checked and put in pattern order by the server's own functions, without a database.
 */
import { readdirSync, readFileSync } from 'node:fs';
import { basename, join } from 'node:path';
import { isComputed, type ComputedSpecification } from '@shared/answer-forms';
import type { CheckResult } from '@shared/checks';
import { partLabel, type ProblemContent } from '@shared/problems';
import { studentCount } from '../demo/accounts';
import { simulateProblem } from '../demo/hand-in-scripts';
import type { SimulatedAnswer } from '../demo/simulated-answer';
import { KeyProblem } from '../server/checks';
import type { CheckInput } from '../server/checks/check-answer';
import { patternsOf } from '../server/checks/patterns';
import { KeyEvaluator, type KeyPool } from '../server/keys';
import { inPatternOrder, seenIn } from '../server/marking/patterns';
import { readProblemFile } from '../server/problems/problem-file';
import { checkProblem } from '../server/scripts/check-problem';
import { drawVariants } from '../server/variants/draw-variant';
import { evaluateVariantKeys } from '../server/variants/evaluate-variant-keys';
import { truthOf, sameMistake, type KeysOfVariant } from './patterns/truth';
import { tally, type Told } from './patterns/tally';

const students = Number(process.argv[2] ?? studentCount);
const wantedRecall = 0.95;
const wantedPrecision = 0.98;
const manyAnswers = 2_000;
const longest = 300;

const evaluator = new KeyEvaluator();
const keys: KeyPool = {
  evaluateMany: (requests) => Promise.resolve(requests.map((each) => evaluator.evaluate(each))),
  close: () => Promise.resolve(),
};

const folder = join(import.meta.dirname, '..', 'demo', 'course');
const problems = readdirSync(folder)
  .flatMap((set) => readdirSync(join(folder, set)).map((file) => join(folder, set, file)))
  .sort()
  .map((file) => ({ name: basename(file, '.md'), content: readProblemFile(readFileSync(file, 'utf8')) }));

/** All answers to one problem, part by part, with what each student did and which pattern was told. */
async function tellProblem(name: string, content: ProblemContent): Promise<readonly Told[]> {
  const seeds = Array.from({ length: students }, (_, student) => `patterns ${name} ${String(student)}`);
  const variants = await drawVariants(keys, content, seeds);
  const written: SimulatedAnswer[][] = [];
  const checked: (readonly (CheckResult | null)[])[] = [];
  const keysOf: KeysOfVariant[][] = content.parts.map(() => []);
  for (const [student, givens] of variants.entries()) {
    const problem = { name, content, problemId: '', revisionId: '' };
    const answers = await simulateProblem({ keys }, problem, givens, student);
    written.push(answers);
    checked.push(
      await checkProblem(
        keys,
        content,
        givens,
        answers.map(({ text }) => ({ text, hasPages: false })),
      ),
    );
    for (const [index, computed] of (await evaluateVariantKeys(keys, content, givens)).entries()) {
      const slips = computed.slips.map((slip) => slip.key?.value);
      keysOf[index]?.push({ key: computed.key?.key?.value, slips });
    }
  }
  return content.parts.flatMap((part, index): Told[] => {
    if (!isComputed(part.answer)) return [];
    const answer = part.answer;
    const pile = written.map((answers, student) => ({
      id: String(student),
      code: String(student).padStart(4, '0'),
      seen: seenIn(checked[student]?.[index] ?? null),
      made: truthOf(answer, answers, index),
      text: answers[index]?.text ?? '',
    }));
    const { answers: ordered, patterns } = inPatternOrder(pile);
    const names = new Map(patterns.map(({ key, name: patternName }) => [key, patternName]));
    const same = sameMistake(answer, keysOf[index] ?? []);
    return ordered.map(({ pattern, made, text, seen }) => {
      const told = pattern.startsWith('relation ') ? (names.get(pattern) ?? null) : null;
      const verdict = seen.check?.verdict ?? 'not checked';
      return { part: `${name} (${partLabel(index)})`, made, told, text, verdict, agrees: same(made, told) };
    });
  });
}

const began = performance.now();
const told = (await Promise.all(problems.map(({ name, content }) => tellProblem(name, content)))).flat();
const scores = tally(told);
console.log(
  `${String(told.length)} answers of ${String(students)} simulated students to ${String(problems.length)} problems (${((performance.now() - began) / 1000).toFixed(1)} s)`,
);
console.log(
  `mistakes made ${String(scores.made)}, told under their own name ${String(scores.found)}: recall ${scores.recall.toFixed(4)} (wanted ${String(wantedRecall)})`,
);
console.log(
  `answers given a name ${String(scores.named)}, rightly ${String(scores.rightly)}: precision ${scores.precision.toFixed(4)} (wanted ${String(wantedPrecision)})`,
);
console.log(`mistakes that left the answer within tolerance, and so are none: ${String(scores.unseen)}`);
for (const line of scores.wrongly) console.log(`  ${line}`);

/** Two thousand answers to one part, ready to be read. */
async function manyInputs(): Promise<readonly CheckInput<ComputedSpecification>[]> {
  const [problem] = problems;
  const answer = problem?.content.parts[0]?.answer;
  if (!problem || !answer || !isComputed(answer)) throw new Error('The first part of the course has no key.');
  const seeds = Array.from({ length: manyAnswers }, (_, student) => `many ${String(student)}`);
  const inputs: CheckInput<ComputedSpecification>[] = [];
  for (const [student, givens] of (await drawVariants(keys, problem.content, seeds)).entries()) {
    const asked = { name: problem.name, content: problem.content, problemId: '', revisionId: '' };
    const [first] = await simulateProblem({ keys }, asked, givens, student);
    const [computed] = await evaluateVariantKeys(keys, problem.content, givens);
    const [key, ...slips] = [computed?.key, ...(computed?.slips ?? [])].map((outcome) => {
      const value = outcome?.key?.value;
      return typeof value === 'number' ? { value } : undefined;
    });
    if (!key) throw new KeyProblem('The first part of the course has no number for a key.');
    inputs.push({ part: answer, text: first?.text ?? '', keys: { key, slips } });
  }
  return inputs;
}

const many = (await manyInputs()).map((input, index) => ({ id: String(index), input }));
const times = Array.from({ length: 7 }, () => {
  const start = performance.now();
  patternsOf(many);
  return performance.now() - start;
}).sort((one, other) => one - other);
const median = times[3] ?? NaN;
console.log(
  `${String(manyAnswers)} answers read, checked and grouped in ${median.toFixed(0)} ms (median of ${String(times.length)}, from ${(times[0] ?? NaN).toFixed(0)} to ${(times[6] ?? NaN).toFixed(0)}; wanted ${String(longest)})`,
);
if (scores.recall < wantedRecall || scores.precision < wantedPrecision || !(median < longest)) process.exitCode = 1;
