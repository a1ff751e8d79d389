import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pino } from 'pino';
import supertest from 'supertest';
import { openDatabase } from '@drizzle/client';
import { courses, memberships, users } from '@drizzle/schema';
import type { Role } from '@shared/primitives';
import { createApp } from '../app';
import { readConfig } from '../config';
import type { Clock, Context } from '../context';
import { benchTokens } from '../courses/members';
import { createFileStore } from '../files/file-store';
import { newId } from '../http/new-id';
import { createKeyPool } from '../keys';
import { createLive } from '../live/live';

/** A clock that stands still until it is set. */
export interface TestClock extends Clock {
  set(now: number): void;
  advance(milliseconds: number): void;
}

/** 24 November 2026, 14:36 UTC. */
export const testNow = Date.UTC(2026, 10, 24, 14, 36);

function testClock(): TestClock {
  let now = testNow;
  return {
    now: () => now,
    set: (next) => {
      now = next;
    },
    advance: (milliseconds) => {
      now += milliseconds;
    },
  };
}

/** The application on a database with the real migrations, in memory unless a file is named, a clock that can be set, and people to be. */
export function createHarness(file = ':memory:') {
  const database = openDatabase(file, 'migrations');
  const { db } = database;
  const clock = testClock();
  const keys = createKeyPool({ size: 1 });
  const config = readConfig({ LOG_LEVEL: 'silent', NODE_ENV: 'test', DEMO: 'off' });
  const context: Context = {
    config,
    db,
    clock,
    keys,
    files: createFileStore(mkdtempSync(join(tmpdir(), 'halfsilver-'))),
    live: createLive(),
    log: pino({ level: 'silent' }),
  };
  const { app, sessions, serve } = createApp(context);

  /** An account; its password hash is not a real one, since tests begin sessions directly. */
  function makePerson(overrides: Partial<typeof users.$inferInsert> = {}) {
    const id = newId();
    const row = {
      id,
      email: `${id.slice(0, 8)}@northmere.example`,
      name: `Person ${id.slice(0, 4)}`,
      passwordHash: 'none',
      isAdministrator: false,
      createdAt: clock.now(),
      ...overrides,
    };
    db.insert(users).values(row).run();
    return row;
  }

  /** A course of its own. */
  function makeCourse(overrides: Partial<typeof courses.$inferInsert> = {}) {
    const row = {
      id: newId(),
      title: 'Light and its quanta',
      term: 'autumn term',
      timeZone: 'Europe/Vienna',
      createdAt: clock.now(),
      ...overrides,
    };
    db.insert(courses).values(row).run();
    return row;
  }

  /** A new person with a role in a course. */
  function makeMember(courseId: string, role: Role, overrides: Partial<typeof users.$inferInsert> = {}) {
    const person = makePerson(overrides);
    const membership = { id: newId(), courseId, userId: person.id, role, createdAt: clock.now() };
    db.insert(memberships)
      .values({ ...membership, ...benchTokens(db, courseId, membership.id, { name: person.name, role }) })
      .run();
    return { ...person, membershipId: membership.id };
  }

  /** A client with that person's session; null for nobody. */
  async function agent(person: { id: string } | null) {
    const client = supertest.agent(app);
    if (person) client.jar.setCookie((await sessions.begin(person.id)).split(';')[0] ?? '', '127.0.0.1', '/');
    return client;
  }

  return {
    context,
    db,
    clock,
    app,
    sessions,
    serve,
    makePerson,
    makeCourse,
    makeMember,
    agent,
    close: async () => {
      await keys.close();
      database.close();
    },
  };
}

export type Harness = ReturnType<typeof createHarness>;
