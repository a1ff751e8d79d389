import { mkdirSync, mkdtempSync, readdirSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import { pino } from 'pino';
import { afterAll, describe, expect, it } from 'vitest';
import { openDatabase } from '@drizzle/client';
import { answers, courses, marks, memberships, problems, reviewDecisions, scripts, sets, users } from '@drizzle/schema';
import { readConfig } from '../server/config';
import { databaseName, filesName, systemClock } from '../server/context';
import { createKeyPool } from '../server/keys';
import { createLive } from '../server/live/live';
import { fillDataFolder } from './fill-data-folder';

const keys = createKeyPool({ size: 1 });
afterAll(() => keys.close());

function partsFor(dataDir: string) {
  const config = readConfig({ DATA_DIR: dataDir, LOG_LEVEL: 'silent', NODE_ENV: 'test' });
  return { config, clock: systemClock, keys, live: createLive(), log: pino({ level: 'silent' }) };
}

describe('the demonstration course', () => {
  const dataDir = mkdtempSync(join(tmpdir(), 'halfsilver-demo-'));
  const lines: string[] = [];

  it(
    'is loaded whole where an earlier loading was interrupted, and says how far it is',
    { timeout: 120_000 },
    async () => {
      // What a killed loading leaves.
      mkdirSync(join(dataDir, 'loading', filesName), { recursive: true });
      writeFileSync(join(dataDir, 'loading', databaseName), 'half of a database');

      expect(await fillDataFolder(partsFor(dataDir), (line) => lines.push(line), 8)).toBe(true);

      expect(lines).toContain('Loading the demonstration: set 1, 8 of 8 scripts');
      expect(readdirSync(dataDir).sort()).toEqual([filesName, databaseName].sort());
      const { db, close } = openDatabase(join(dataDir, databaseName), 'migrations');
      const stages = db.select({ stage: sets.stage }).from(sets).orderBy(sets.createdAt).all();
      expect(stages.map(({ stage }) => stage)).toEqual(['released', 'marking', 'open', 'review']);
      expect(db.select().from(courses).all()).toHaveLength(1);
      const roles = db.select({ role: memberships.role }).from(memberships).all();
      expect(roles.filter(({ role }) => role === 'lead')).toHaveLength(1);
      expect(roles.filter(({ role }) => role === 'marker')).toHaveLength(4);
      expect(roles.filter(({ role }) => role === 'student')).toHaveLength(8);
      expect(db.select().from(problems).all().length).toBeGreaterThanOrEqual(8);
      const ready = db.select().from(problems).where(eq(problems.status, 'ready')).all();
      const signedOff = db.select().from(reviewDecisions).where(eq(reviewDecisions.kind, 'signed off')).all();
      expect(ready.filter(({ id }) => !signedOff.some(({ problemId }) => problemId === id))).toEqual([]);
      expect(db.select().from(scripts).all().length).toBeGreaterThan(16);
      expect(db.select().from(answers).all().length).toBeGreaterThan(100);
      expect(db.select().from(marks).all().length).toBeGreaterThan(20);
      expect(db.select().from(users).all()).toHaveLength(14);
      close();
    },
  );

  it('leaves alone what is already there', async () => {
    expect(await fillDataFolder(partsFor(dataDir), () => undefined, 8)).toBe(false);
  });
});
