// `npm run bench:closing`: 300 students save every five seconds and all submit within the last minute; then as many saves
// as go through, beside a bare Express handler that inserts one row as durably. Traffic stays on the loopback.
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { Agent, request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { openDatabase } from '@drizzle/client';
import { answerVersions, submissions } from '@drizzle/schema';
import { scriptsRoutes } from '@shared/scripts';
import { buildProgram } from '../scripts/build-program.mjs';
import { freePort } from '../scripts/start-demonstration.mjs';
import { startServer } from '../scripts/start-server.mjs';
import { buildOpenSet } from '../server/scripts/testing/build-set';
import { createHarness } from '../server/testing/harness';

const students = Number(process.env['STUDENTS'] ?? 300);
const minute = Number(process.env['SECONDS'] ?? 60) * 1_000;
const saveEvery = 5_000;
const saturation = { connections: 16, milliseconds: 10_000 };
const goals = { slowest: 250, share: 0.5 };

interface Answered {
  readonly status: number;
  readonly body: string;
  readonly milliseconds: number;
}

interface Student {
  readonly cookie: string;
  answerId: string;
  version: number;
  /** The last text that the server said it had. */
  kept: string;
}

const agent = new Agent({ keepAlive: true, maxSockets: 512 });
const folder = mkdtempSync(join(tmpdir(), 'halfsilver-closing-'));
const file = join(folder, 'halfsilver.db');

await buildProgram();
const { setId, cookies } = await prepare();
const port = await freePort();
const server = await startServer({
  DATA_DIR: folder,
  PORT: String(port),
  ORIGIN: `http://localhost:${String(port)}`,
  DEMO: 'off',
  LOG_LEVEL: 'error',
});
try {
  const everybody = cookies.map((cookie): Student => ({ cookie, answerId: '', version: 0, kept: '' }));
  for (const student of everybody) await openSheet(student);
  console.log(`${String(students)} students have their sheets open.`);
  await lastMinute(everybody);
  await saturate(everybody);
} finally {
  await server.stop();
  agent.destroy();
  rmSync(folder, { recursive: true, force: true });
}

/** An open set and its students, each with a session. */
async function prepare(): Promise<{ readonly setId: string; readonly cookies: readonly string[] }> {
  const harness = createHarness(file);
  harness.clock.set(Date.now());
  const { setId, course } = await buildOpenSet(harness);
  const cookies: string[] = [];
  for (let index = 0; index < students; index++) {
    const student = harness.makeMember(course.id, 'student');
    cookies.push((await harness.sessions.begin(student.id)).split(';')[0] ?? '');
  }
  await harness.close();
  return { setId, cookies };
}

async function openSheet(student: Student): Promise<void> {
  const answered = await send('GET', `/api/sets/${setId}/sheet`, student);
  const sheet = scriptsRoutes.sheet.response.parse(JSON.parse(answered.body));
  const part = sheet.problems[0]?.parts[0];
  if (!part) throw new Error('The sheet has no part.');
  student.answerId = part.answerId;
  student.version = part.version;
}

async function lastMinute(everybody: readonly Student[]): Promise<void> {
  const saves: number[] = [];
  const submits: number[] = [];
  let failed = 0;
  const end = Date.now() + minute;
  await Promise.all(
    everybody.map(async (student, place) => {
      // Everybody types at moments of their own, and submits somewhere in the minute.
      await wait((saveEvery * place) / everybody.length);
      const submitsAt = end - minute * ((place * 0.618) % 1);
      let submitted = false;
      for (let round = 1; Date.now() < end; round++) {
        const began = Date.now();
        const saved = await save(student, `${String(place)}.${String(round)}`);
        saves.push(saved.milliseconds);
        if (saved.status !== 200) failed++;
        if (!submitted && Date.now() >= submitsAt) {
          submitted = true;
          submits.push(await submit(student, place));
        }
        await wait(saveEvery - (Date.now() - began));
      }
      if (!submitted) submits.push(await submit(student, place));
    }),
  );

  async function submit(student: Student, place: number): Promise<number> {
    const key = `closing-${String(place).padStart(12, '0')}`;
    const answered = await send('POST', `/api/sets/${setId}/submissions`, student, {}, { 'Idempotency-Key': key });
    if (answered.status !== 200) {
      failed++;
      console.log(`  a submission was answered ${String(answered.status)}: ${answered.body.slice(0, 200)}`);
    }
    return answered.milliseconds;
  }

  const lost = countLost(everybody);
  console.log(`\nThe last minute: ${String(saves.length)} saves, ${String(submits.length)} submissions`);
  console.log(`  saves        ${percentiles(saves)}`);
  console.log(`  submissions  ${percentiles(submits)}`);
  const within = percentile([...saves, ...submits], 0.99) <= goals.slowest;
  console.log(`  99 % under ${String(goals.slowest)} ms: ${within ? 'yes' : 'NO'}`);
  console.log(
    `  failed requests: ${String(failed)}; lost answers: ${String(lost)}; handed in: ${String(countHandedIn())}`,
  );
}

/** Answers whose last acknowledged text is not the latest in the database. */
function countLost(everybody: readonly Student[]): number {
  const { db, close } = openDatabase(file, 'migrations');
  const latest = new Map<string, { number: number; text: string }>();
  for (const { answerId, number, text } of db.select().from(answerVersions).all())
    if (number > (latest.get(answerId)?.number ?? 0)) latest.set(answerId, { number, text });
  close();
  return everybody.filter(({ answerId, kept }) => latest.get(answerId)?.text !== kept).length;
}

function countHandedIn(): number {
  const { db, close } = openDatabase(file, 'migrations');
  const handedIn = db.select({ id: submissions.id }).from(submissions).all().length;
  close();
  return handedIn;
}

async function saturate(everybody: readonly Student[]): Promise<void> {
  const barePort = await freePort();
  const bare = spawn(
    process.execPath,
    ['--import', 'tsx', join('bench', 'bare-handler.ts'), join(folder, 'bare.db'), String(barePort)],
    { stdio: ['ignore', 'pipe', 'inherit'] },
  );
  await once(bare.stdout, 'data');
  // In turns, so that a busy machine slows both.
  const rates = { ours: [] as number[], bare: [] as number[] };
  for (let turn = 0; turn < 2; turn++) {
    rates.bare.push(await rate(everybody, barePort));
    rates.ours.push(await rate(everybody, port));
  }
  bare.kill('SIGTERM');
  const mean = (values: readonly number[]) => values.reduce((sum, each) => sum + each, 0) / values.length;
  const share = mean(rates.ours) / mean(rates.bare);
  console.log(`\nSaturated, ${String(saturation.connections)} connections:`);
  console.log(`  bare handler ${mean(rates.bare).toFixed(0)} requests a second, a save ${mean(rates.ours).toFixed(0)}`);
  console.log(
    `  ${share.toFixed(2)} of the bare handler (goal ${String(goals.share)}): ${share >= goals.share ? 'yes' : 'NO'}`,
  );
}

async function rate(everybody: readonly Student[], to: number): Promise<number> {
  const began = Date.now();
  let done = 0;
  await Promise.all(
    everybody.slice(0, saturation.connections).map(async (student, place) => {
      for (let round = 0; Date.now() - began < saturation.milliseconds; round++) {
        const text = `${String(place)}.${String(round)}`;
        const answered =
          to === port
            ? await save(student, text)
            : await send('PUT', `/answers/${student.answerId}/text`, student, { text }, {}, to);
        if (answered.status !== 200)
          throw new Error(`A save was answered ${String(answered.status)}: ${answered.body}`);
        done++;
      }
    }),
  );
  return (done * 1_000) / (Date.now() - began);
}

async function save(student: Student, text: string): Promise<Answered> {
  const headers = { 'If-Match': String(student.version) };
  const answered = await send('PUT', `/api/answers/${student.answerId}/text`, student, { text }, headers);
  if (answered.status === 200) {
    const { version, answer } = scriptsRoutes.saveAnswer.response.parse(JSON.parse(answered.body));
    student.version = version;
    student.kept = answer;
  }
  return answered;
}

function send(
  method: string,
  path: string,
  { cookie }: Student,
  body?: unknown,
  headers: Readonly<Record<string, string>> = {},
  to = port,
): Promise<Answered> {
  const began = performance.now();
  const text = body === undefined ? undefined : JSON.stringify(body);
  return new Promise((resolve, reject) => {
    const sent = request(
      {
        ...{ agent, host: '127.0.0.1', port: to, method, path },
        headers: {
          cookie,
          ...(text === undefined
            ? {}
            : { 'content-type': 'application/json', 'content-length': Buffer.byteLength(text) }),
          ...headers,
        },
      },
      (response) => {
        let received = '';
        response.setEncoding('utf8');
        response.on('data', (chunk: string) => (received += chunk));
        response.on('end', () => {
          resolve({ status: response.statusCode ?? 0, body: received, milliseconds: performance.now() - began });
        });
      },
    );
    sent.on('error', reject);
    sent.end(text);
  });
}

function wait(milliseconds: number): Promise<void> {
  return new Promise((resolve) => setTimeout(resolve, Math.max(0, milliseconds)));
}

function percentile(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * share))] ?? 0;
}

function percentiles(values: readonly number[]): string {
  return [0.5, 0.95, 0.99, 1]
    .map(
      (share) => `${share === 1 ? 'slowest' : `${String(share * 100)} %`} ${percentile(values, share).toFixed(0)} ms`,
    )
    .join(', ');
}
