import { and, count, desc, eq, like, or } from 'drizzle-orm';
import { recordRoutes } from '@shared/record';
import { record, users } from '@drizzle/schema';
import { demand } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';

const pageSize = 50;

/** The record, as leads read it. */
export function addRecordRoutes(serve: Serve, context: Context): void {
  const { db } = context;

  serve(recordRoutes.record, ({ user, params, query }) => {
    demand(user, 'read the record', params.courseId);
    const inCourse = eq(record.courseId, params.courseId);
    const term = `%${query.search}%`;
    const where = and(
      inCourse,
      query.thing ? eq(record.thing, query.thing) : undefined,
      query.search ? or(like(record.sentence, term), like(record.action, term), like(users.name, term)) : undefined,
    );
    const total =
      db.select({ n: count() }).from(record).leftJoin(users, eq(users.id, record.actorId)).where(where).get()?.n ?? 0;
    const rows = db
      .select({ entry: record, actor: users.name })
      .from(record)
      .leftJoin(users, eq(users.id, record.actorId))
      .where(where)
      .orderBy(desc(record.at), desc(record.id))
      .limit(pageSize)
      .offset((query.page - 1) * pageSize)
      .all();
    const things = db
      .selectDistinct({ thing: record.thing })
      .from(record)
      .where(inCourse)
      .orderBy(record.thing)
      .all()
      .map((row) => row.thing);
    const items = rows.map(({ entry, actor }) => {
      const { id, at, action, thing, sentence, reason } = entry;
      return { id, at, actor, action, thing, sentence, reason };
    });
    return { items, total, things };
  });
}
