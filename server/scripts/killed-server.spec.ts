import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { afterEach, describe, expect, it } from 'vitest';
import { openDatabase } from '@drizzle/client';
import { answerVersions } from '@drizzle/schema';

let child: ChildProcess | undefined;
afterEach(() => {
  child?.kill('SIGKILL');
});

interface Place {
  readonly port: number;
  readonly cookie: string;
  readonly answerId: string;
}

async function serve(file: string): Promise<Place> {
  const program = join(import.meta.dirname, 'testing/serve-until-killed.ts');
  const started = spawn(process.execPath, ['--import', 'tsx', program, file], { stdio: ['ignore', 'pipe', 'inherit'] });
  child = started;
  for await (const line of createInterface({ input: started.stdout })) return JSON.parse(line) as Place;
  throw new Error('The server ended before it listened.');
}

describe('a server that is killed', () => {
  it('has every save that it acknowledged', async () => {
    const file = join(mkdtempSync(join(tmpdir(), 'halfsilver-kill-')), 'halfsilver.db');
    const { port, cookie, answerId } = await serve(file);
    const save = (text: string, version: number) =>
      fetch(`http://127.0.0.1:${String(port)}/api/answers/${answerId}/text`, {
        method: 'PUT',
        headers: {
          cookie,
          'Content-Type': 'application/json',
          'If-Match': String(version),
          'Idempotency-Key': `save-number-${String(version)}`,
        },
        body: JSON.stringify({ text }),
      });
    expect((await save('4.7', 0)).status).toBe(200);
    const last = await save('4.742', 1);
    // Killed as soon as the acknowledgement has begun to arrive, before anything else can be asked.
    const ended = child && once(child, 'exit');
    child?.kill('SIGKILL');
    await ended;
    expect(last.status).toBe(200);

    const database = openDatabase(file, 'migrations');
    const kept = database.db.select().from(answerVersions).orderBy(answerVersions.number).all();
    database.close();
    expect(kept.map((row) => row.text)).toEqual(['4.7', '4.742']);
  });
});
