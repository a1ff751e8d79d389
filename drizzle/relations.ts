import { relations } from 'drizzle-orm';
import * as tables from './schema';

/** A membership joins a person and a course. */
export const membershipRelations = relations(tables.memberships, ({ one }) => ({
  user: one(tables.users, { fields: [tables.memberships.userId], references: [tables.users.id] }),
  course: one(tables.courses, { fields: [tables.memberships.courseId], references: [tables.courses.id] }),
}));

/** A set holds problems in an order. */
export const setRelations = relations(tables.sets, ({ many }) => ({
  problems: many(tables.setProblems),
  stages: many(tables.setStages),
}));

/** A problem in a set is pinned to one revision. */
export const setProblemRelations = relations(tables.setProblems, ({ one }) => ({
  set: one(tables.sets, { fields: [tables.setProblems.setId], references: [tables.sets.id] }),
  revision: one(tables.revisions, { fields: [tables.setProblems.revisionId], references: [tables.revisions.id] }),
}));

/** An entry of a set's history belongs to the set. */
export const setStageRelations = relations(tables.setStages, ({ one }) => ({
  set: one(tables.sets, { fields: [tables.setStages.setId], references: [tables.sets.id] }),
}));
