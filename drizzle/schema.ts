import { sql } from 'drizzle-orm';
import { check, index, integer, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core';
import type { AuditFinding, PartAudit } from '@shared/audit';
import type { AnswerDigest, CheckResult } from '@shared/checks';
import type { CorrectionStep } from '@shared/corrections';
import type { LateRule } from '@shared/late-rule';
import type { MarkedCriterion } from '@shared/marking';
import type { ProblemDraft } from '@shared/problem-draft';
import type { ProblemContent } from '@shared/problems';
import { setStageNames } from '@shared/primitives';
import { queryPolicies } from '@shared/query-policy';
import { reviewDecisionKinds, type CommentAnchor } from '@shared/review';
import type { GivenValue } from '@shared/variants';

/*
 * Every table of the installation, in the order of the work: people, courses, problems, sets, scripts, marks, record.
 *
 * Identifiers are random (UUIDv4), so that none tells time or order. Times are UTC milliseconds, except the expiry of
 * sessions, which the session library counts in seconds. No foreign key cascades: a rebuilt table would fire it.
 */

const id = () => text().primaryKey();
const time = () => integer();
const version = () => integer().notNull().default(1);

// ---------------------------------------------------------------------------------------------- people and accounts

export const users = sqliteTable(
  'users',
  {
    id: id(),
    /** Lower case, as it is compared. */
    email: text().notNull(),
    name: text().notNull(),
    /** Argon2id in its own notation; null until an invitation is accepted. */
    passwordHash: text(),
    isAdministrator: integer({ mode: 'boolean' }).notNull().default(false),
    createdAt: time().notNull(),
  },
  (table) => [uniqueIndex('users_email').on(table.email)],
);

/** Sign-ins. The id is the SHA-256 of the token in the cookie. */
export const sessions = sqliteTable(
  'sessions',
  {
    id: id(),
    userId: text()
      .notNull()
      .references(() => users.id),
    /** Seconds since 1970, as the session library wants it. */
    expiresAt: integer().notNull(),
  },
  (table) => [index('sessions_user').on(table.userId)],
);

/** Single-use secrets sent by mail, stored as SHA-256. */
export const tokens = sqliteTable(
  'tokens',
  {
    id: id(),
    kind: text({ enum: ['invitation', 'password reset', 'first administrator'] }).notNull(),
    hash: text().notNull(),
    /** Null for the link that makes the first administrator. */
    userId: text().references(() => users.id),
    createdAt: time().notNull(),
    expiresAt: time().notNull(),
    usedAt: time(),
  },
  (table) => [uniqueIndex('tokens_hash').on(table.hash), index('tokens_user').on(table.userId)],
);

/** Failed guesses, counted by account and by address; the subject is hashed, so that no address is kept. */
export const guesses = sqliteTable('guesses', {
  /** SHA-256 of `account:…` or `address:…`. */
  subject: text().primaryKey(),
  failures: integer().notNull(),
  since: time().notNull(),
  lockedUntil: time(),
});

/** Secret addresses of calendar feeds, stored as SHA-256; a person has one at a time. */
export const calendarAddresses = sqliteTable(
  'calendar_addresses',
  {
    id: id(),
    userId: text()
      .notNull()
      .references(() => users.id),
    hash: text().notNull(),
    createdAt: time().notNull(),
    revokedAt: time(),
  },
  (table) => [
    uniqueIndex('calendar_addresses_hash').on(table.hash),
    uniqueIndex('calendar_addresses_person')
      .on(table.userId)
      .where(sql`revoked_at is null`),
  ],
);

// ----------------------------------------------------------------------------------------------------------- courses

export const courses = sqliteTable('courses', {
  id: id(),
  title: text().notNull(),
  term: text().notNull(),
  /** IANA name, for example Europe/Vienna. */
  timeZone: text().notNull(),
  vacuumVariance: real().notNull().default(0.5),
  squeezingSign: integer().notNull().default(1),
  splitterPhase: real()
    .notNull()
    .default(Math.PI / 2),
  /** What a mark query can do to a mark, as the course tells its students. */
  queryPolicy: text({ enum: queryPolicies }).notNull().default('raise or lower'),
  createdAt: time().notNull(),
  version: version(),
});

/** Who has which role in a course. A person has one role a course. */
export const memberships = sqliteTable(
  'memberships',
  {
    id: id(),
    courseId: text()
      .notNull()
      .references(() => courses.id),
    userId: text()
      .notNull()
      .references(() => users.id),
    role: text({ enum: ['lead', 'marker', 'student'] }).notNull(),
    /** A marker's or lead's initials and hue (1 to 8) on the bench; null for students. */
    initials: text(),
    hue: integer(),
    createdAt: time().notNull(),
    removedAt: time(),
  },
  (table) => [
    uniqueIndex('memberships_person').on(table.courseId, table.userId),
    index('memberships_user').on(table.userId),
  ],
);

// ---------------------------------------------------------------------------------------------------------- problems

export const problems = sqliteTable('problems', {
  id: id(),
  authorId: text()
    .notNull()
    .references(() => users.id),
  status: text({ enum: ['draft', 'in review', 'ready', 'retired'] })
    .notNull()
    .default('draft'),
  /** What is being written, as it is typed. A revision is frozen content made of it. */
  draft: text({ mode: 'json' }).$type<ProblemDraft>().notNull(),
  draftSavedAt: time().notNull(),
  createdAt: time().notNull(),
  version: version(),
});

/** Immutable states of a problem. */
export const revisions = sqliteTable(
  'revisions',
  {
    id: id(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    number: integer().notNull(),
    content: text({ mode: 'json' }).$type<ProblemContent>().notNull(),
    authorId: text()
      .notNull()
      .references(() => users.id),
    reason: text().notNull(),
    createdAt: time().notNull(),
  },
  (table) => [uniqueIndex('revisions_number').on(table.problemId, table.number)],
);

/** What colleagues say about a problem's draft, and their replies. */
export const problemComments = sqliteTable(
  'problem_comments',
  {
    id: id(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    /** The comment that this one answers; null for one that begins. */
    repliesToId: text(),
    /** What it is about. A line's number follows the draft as it is saved. */
    anchor: text({ mode: 'json' }).$type<CommentAnchor>().notNull(),
    text: text().notNull(),
    /** Suggested wording, and what it is to take the place of; both null where none is suggested. */
    wording: text(),
    instead: text(),
    acceptedAt: time(),
    acceptedById: text().references(() => users.id),
    byId: text()
      .notNull()
      .references(() => users.id),
    at: time().notNull(),
    settledAt: time(),
    settledById: text().references(() => users.id),
    idempotencyKey: text().notNull(),
  },
  (table) => [
    index('problem_comments_problem').on(table.problemId, table.at),
    uniqueIndex('problem_comments_key').on(table.problemId, table.byId, table.idempotencyKey),
  ],
);

/** Who was asked to review a problem, and by when. */
export const reviewRequests = sqliteTable(
  'review_requests',
  {
    id: id(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    colleagueId: text()
      .notNull()
      .references(() => users.id),
    askedById: text()
      .notNull()
      .references(() => users.id),
    at: time().notNull(),
    dueAt: time().notNull(),
    note: text().notNull().default(''),
    /** When they decided; null while they are waited for. */
    answeredAt: time(),
  },
  (table) => [
    index('review_requests_problem').on(table.problemId),
    index('review_requests_colleague').on(table.colleagueId, table.answeredAt),
    uniqueIndex('review_requests_open')
      .on(table.problemId, table.colleagueId)
      .where(sql`answered_at is null`),
  ],
);

/** A colleague's solution of one variant of a revision, before students meet it. */
export const tryOuts = sqliteTable(
  'try_outs',
  {
    id: id(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    revisionId: text()
      .notNull()
      .references(() => revisions.id),
    byId: text()
      .notNull()
      .references(() => users.id),
    givens: text({ mode: 'json' }).$type<Readonly<Record<string, GivenValue>>>().notNull(),
    /** Texts as they are typed, by the part's id. */
    answers: text({ mode: 'json' }).$type<Readonly<Record<string, string>>>().notNull(),
    /** How long somebody was at it, idle times left out. */
    activeSeconds: integer().notNull().default(0),
    startedAt: time().notNull(),
    savedAt: time().notNull(),
    handedInAt: time(),
    /** How the check judged each part, in their order; null before it was handed in. */
    results: text({ mode: 'json' }).$type<readonly (CheckResult | null)[]>(),
  },
  (table) => [
    index('try_outs_problem').on(table.problemId, table.handedInAt),
    uniqueIndex('try_outs_open')
      .on(table.revisionId, table.byId)
      .where(sql`handed_in_at is null`),
  ],
);

/** Sign-offs, wishes for changes and overrulings of revisions. Append-only. */
export const reviewDecisions = sqliteTable(
  'review_decisions',
  {
    id: id(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    revisionId: text()
      .notNull()
      .references(() => revisions.id),
    kind: text({ enum: reviewDecisionKinds }).notNull(),
    byId: text()
      .notNull()
      .references(() => users.id),
    at: time().notNull(),
    words: text().notNull().default(''),
  },
  (table) => [index('review_decisions_problem').on(table.problemId, table.at)],
);

// -------------------------------------------------------------------------------------------------------------- sets

export const sets = sqliteTable(
  'sets',
  {
    id: id(),
    courseId: text()
      .notNull()
      .references(() => courses.id),
    /** "Set 4". */
    number: integer().notNull(),
    title: text().notNull(),
    coverText: text().notNull().default(''),
    stage: text({ enum: setStageNames }).notNull().default('draft'),
    opensAt: time(),
    closesAt: time(),
    individualVariants: integer({ mode: 'boolean' }).notNull().default(true),
    /** Whether students see the key of their variant with their feedback. */
    showKeys: integer({ mode: 'boolean' }).notNull().default(true),
    /** What becomes of work that comes after the closing time; null: it is not taken. */
    lateRule: text({ mode: 'json' }).$type<LateRule>(),
    /** Until when marks can be queried; null: fourteen days after release. */
    queriesCloseAt: time(),
    /** Random; every variant of the set is drawn from it. */
    seed: text().notNull(),
    createdAt: time().notNull(),
    version: version(),
  },
  (table) => [uniqueIndex('sets_number').on(table.courseId, table.number)],
);

/** When a set entered each stage, and by whom (null: by the clock). Append-only. */
export const setStages = sqliteTable(
  'set_stages',
  {
    id: id(),
    setId: text()
      .notNull()
      .references(() => sets.id),
    stage: text({ enum: setStageNames }).notNull(),
    at: time().notNull(),
    byId: text().references(() => users.id),
  },
  (table) => [index('set_stages_set').on(table.setId, table.at)],
);

/** The problems of a set in their order, each pinned to a revision. */
export const setProblems = sqliteTable(
  'set_problems',
  {
    id: id(),
    setId: text()
      .notNull()
      .references(() => sets.id),
    /** From 1. */
    position: integer().notNull(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    revisionId: text()
      .notNull()
      .references(() => revisions.id),
    /** The correction whose keys, tolerances and slips hold instead of the revision's; null where none was made. */
    correctionId: text(),
  },
  (table) => [
    index('set_problems_set').on(table.setId, table.position),
    index('set_problems_problem').on(table.problemId),
  ],
);

/** One draw of a problem's givens, for one student or (membership null) for all. */
export const variants = sqliteTable(
  'variants',
  {
    id: id(),
    setProblemId: text()
      .notNull()
      .references(() => setProblems.id),
    membershipId: text().references(() => memberships.id),
    givens: text({ mode: 'json' }).$type<Readonly<Record<string, GivenValue>>>().notNull(),
  },
  (table) => [
    uniqueIndex('variants_student').on(table.setProblemId, table.membershipId),
    uniqueIndex('variants_shared')
      .on(table.setProblemId)
      .where(sql`membership_id is null`),
  ],
);

/** All answers to one part of a set. Made when the set opens; `sequence` numbers its live events. */
export const piles = sqliteTable(
  'piles',
  {
    id: id(),
    setId: text()
      .notNull()
      .references(() => sets.id),
    setProblemId: text()
      .notNull()
      .references(() => setProblems.id),
    partId: text().notNull(),
    sequence: integer().notNull().default(0),
  },
  (table) => [uniqueIndex('piles_part').on(table.setProblemId, table.partId), index('piles_set').on(table.setId)],
);

// ----------------------------------------------------------------------------------------------------------- scripts

/** What one student hands in for one set. Made when the sheet is first opened, or at closing. */
export const scripts = sqliteTable(
  'scripts',
  {
    id: id(),
    setId: text()
      .notNull()
      .references(() => sets.id),
    membershipId: text()
      .notNull()
      .references(() => memberships.id),
    /** Four characters, drawn at random, unique in the set. */
    code: text().notNull(),
    createdAt: time().notNull(),
    /** When its student's time was over and what was saved was handed in; from then on it enters the piles. */
    closedAt: time(),
    /** When it was released before the set as a whole, because others still had time; null otherwise. */
    releasedAt: time(),
  },
  (table) => [
    uniqueIndex('scripts_student').on(table.setId, table.membershipId),
    uniqueIndex('scripts_code').on(table.setId, table.code),
  ],
);

/** An adjustment for one student in one set. Private to leads and that student; one that was changed is withdrawn first. */
export const allowances = sqliteTable(
  'allowances',
  {
    id: id(),
    setId: text()
      .notNull()
      .references(() => sets.id),
    membershipId: text()
      .notNull()
      .references(() => memberships.id),
    /** When the set closes for this student; null: with the set. */
    closesAt: time(),
    waivesLateRule: integer({ mode: 'boolean' }).notNull().default(false),
    reason: text().notNull(),
    byId: text()
      .notNull()
      .references(() => users.id),
    createdAt: time().notNull(),
    withdrawnAt: time(),
  },
  (table) => [
    uniqueIndex('allowances_student')
      .on(table.setId, table.membershipId)
      .where(sql`withdrawn_at is null`),
  ],
);

/** A script's content for one part, and where its marking stands. `version` counts every change of its marking. */
export const answers = sqliteTable(
  'answers',
  {
    id: id(),
    scriptId: text()
      .notNull()
      .references(() => scripts.id),
    pileId: text()
      .notNull()
      .references(() => piles.id),
    /** Null until the script is handed in. `waits`: on the pile. */
    state: text({ enum: ['waits', 'marked', 'set aside'] }),
    /** The check of what was handed in last. */
    checkId: text(),
    standingMarkId: text(),
    setAsideReason: text(),
    setAsideById: text().references(() => memberships.id),
    /** Why a mark that a person gave deserves another look; the mark stands meanwhile. */
    anotherLook: text(),
    version: version(),
  },
  (table) => [
    uniqueIndex('answers_part').on(table.scriptId, table.pileId),
    index('answers_pile').on(table.pileId, table.state),
    check('answers_marked', sql`${table.state} is not 'marked' or ${table.standingMarkId} is not null`),
  ],
);

/** Every saved text of an answer. Append-only. */
export const answerVersions = sqliteTable(
  'answer_versions',
  {
    id: id(),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    /** From 1. */
    number: integer().notNull(),
    text: text().notNull(),
    savedAt: time().notNull(),
    /** Given by the client: the same save twice is one version. */
    idempotencyKey: text().notNull(),
  },
  (table) => [
    uniqueIndex('answer_versions_number').on(table.answerId, table.number),
    uniqueIndex('answer_versions_key').on(table.answerId, table.idempotencyKey),
  ],
);

/** Worked pages. A replaced page keeps its row: what a submission names must stay readable. */
export const pages = sqliteTable(
  'pages',
  {
    id: id(),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    /** Where the file store keeps it. */
    storageKey: text().notNull(),
    sha256: text().notNull(),
    mediaType: text({ enum: ['application/pdf', 'image/jpeg', 'image/png', 'image/webp'] }).notNull(),
    bytes: integer().notNull(),
    pageCount: integer().notNull(),
    addedAt: time().notNull(),
    removedAt: time(),
    idempotencyKey: text().notNull(),
  },
  (table) => [
    index('pages_answer').on(table.answerId),
    uniqueIndex('pages_key').on(table.answerId, table.idempotencyKey),
  ],
);

/** What was handed in, by the student or at closing by the server. Append-only. */
export const submissions = sqliteTable(
  'submissions',
  {
    id: id(),
    scriptId: text()
      .notNull()
      .references(() => scripts.id),
    /** From 1; the last one counts. */
    number: integer().notNull(),
    at: time().notNull(),
    by: text({ enum: ['student', 'closing'] }).notNull(),
    /** The texts and files that were handed in, in a canonical order. */
    content: text({ mode: 'json' }).$type<readonly AnswerDigest[]>().notNull(),
    /** SHA-256 over the canonical form of `content`, as the receipt shows it. */
    digest: text().notNull(),
    idempotencyKey: text().notNull(),
  },
  (table) => [
    uniqueIndex('submissions_number').on(table.scriptId, table.number),
    uniqueIndex('submissions_key').on(table.scriptId, table.idempotencyKey),
  ],
);

/** How the server judged one answer of one submission. Append-only: a new check supersedes, it does not replace. */
export const checks = sqliteTable(
  'checks',
  {
    id: id(),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    submissionId: text()
      .notNull()
      .references(() => submissions.id),
    result: text({ mode: 'json' }).$type<CheckResult>().notNull(),
    at: time().notNull(),
  },
  (table) => [index('checks_answer').on(table.answerId)],
);

// ----------------------------------------------------------------------------------------------------------- marking

/** Append-only. Which mark stands is named by `answers.standing_mark_id`, never "the latest". */
export const marks = sqliteTable(
  'marks',
  {
    id: id(),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    kind: text({ enum: ['first', 'second', 'settled'] }).notNull(),
    /** Null: the check stands without a person. */
    markerId: text().references(() => memberships.id),
    criteria: text({ mode: 'json' }).$type<readonly MarkedCriterion[]>().notNull(),
    total: real().notNull(),
    remark: text().notNull().default(''),
    at: time().notNull(),
    /** The mark that this one takes the place of. */
    replacesId: text(),
    reason: text(),
    /** The application to a pattern that gave it, where it was not seen singly; null where a person saw the answer. */
    patternApplicationId: text(),
    idempotencyKey: text().notNull(),
  },
  (table) => [
    index('marks_answer').on(table.answerId, table.at),
    uniqueIndex('marks_key').on(table.answerId, table.idempotencyKey),
    // However two markers race: an answer has one first mark of each kind, and a mark is replaced once.
    uniqueIndex('marks_once')
      .on(table.answerId, table.kind)
      .where(sql`replaces_id is null`),
    uniqueIndex('marks_replaced_once').on(table.replacesId),
  ],
);

/** Students' reasoned requests to look at a mark again. Append-only: what becomes of one is a row of `query_answers`. */
export const markQueries = sqliteTable(
  'mark_queries',
  {
    id: id(),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    /** The mark that stood when it was asked. */
    markId: text()
      .notNull()
      .references(() => marks.id),
    /** The criterion that it is about; null for the part as a whole. */
    criterionId: text(),
    reason: text().notNull(),
    /** What the student was told that a query can do; it holds for this one whatever the course says later. */
    policy: text({ enum: queryPolicies }).notNull(),
    at: time().notNull(),
    idempotencyKey: text().notNull(),
  },
  (table) => [
    index('mark_queries_answer').on(table.answerId, table.at),
    uniqueIndex('mark_queries_key').on(table.answerId, table.idempotencyKey),
  ],
);

/** Answers to mark queries, one each. Append-only. */
export const queryAnswers = sqliteTable(
  'query_answers',
  {
    id: id(),
    queryId: text()
      .notNull()
      .references(() => markQueries.id),
    byId: text()
      .notNull()
      .references(() => memberships.id),
    at: time().notNull(),
    /** What the student reads. */
    words: text().notNull(),
    /** The mark that stands since; where it was changed, a new one that names the one it replaces. */
    markId: text()
      .notNull()
      .references(() => marks.id),
    isChanged: integer({ mode: 'boolean' }).notNull(),
    idempotencyKey: text().notNull(),
  },
  (table) => [uniqueIndex('query_answers_query').on(table.queryId)],
);

/** Questions on a pile's part and what the lead decided. A decided one never changes again (a trigger sees to it). */
export const rulings = sqliteTable(
  'rulings',
  {
    id: id(),
    pileId: text()
      .notNull()
      .references(() => piles.id),
    question: text().notNull(),
    askedById: text()
      .notNull()
      .references(() => memberships.id),
    askedAt: time().notNull(),
    /** In words; null while it is open. */
    decision: text(),
    decidedById: text().references(() => memberships.id),
    decidedAt: time(),
    idempotencyKey: text().notNull(),
  },
  (table) => [
    index('rulings_pile').on(table.pileId, table.askedAt),
    uniqueIndex('rulings_key').on(table.pileId, table.askedById, table.idempotencyKey),
  ],
);

/** Answers that a ruling concerns, and who said so. Append-only. */
export const rulingAnswers = sqliteTable(
  'ruling_answers',
  {
    id: id(),
    rulingId: text()
      .notNull()
      .references(() => rulings.id),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    byId: text()
      .notNull()
      .references(() => memberships.id),
    at: time().notNull(),
  },
  (table) => [uniqueIndex('ruling_answers_once').on(table.rulingId, table.answerId)],
);

/** One act that marked the free answers of a pattern alike. Its marks name it: nobody saw their pages singly. */
export const patternApplications = sqliteTable(
  'pattern_applications',
  {
    id: id(),
    pileId: text()
      .notNull()
      .references(() => piles.id),
    /** The pattern's key when it was applied. */
    pattern: text().notNull(),
    byId: text()
      .notNull()
      .references(() => memberships.id),
    at: time().notNull(),
    /** When it was taken back as a whole; null while it holds. */
    undoneAt: time(),
    idempotencyKey: text().notNull(),
  },
  (table) => [uniqueIndex('pattern_applications_key').on(table.pileId, table.byId, table.idempotencyKey)],
);

/** A marker's short claim on one answer; at most one an answer, gone when it expires. */
export const holds = sqliteTable(
  'holds',
  {
    answerId: text()
      .primaryKey()
      .references(() => answers.id),
    membershipId: text()
      .notNull()
      .references(() => memberships.id),
    /** The open bench that holds it: one person may have two. */
    benchId: text().notNull(),
    /** In hand, or one of the next two kept ready. */
    kind: text({ enum: ['in hand', 'reserved'] }).notNull(),
    takenAt: time().notNull(),
    expiresAt: time().notNull(),
  },
  (table) => [index('holds_holder').on(table.membershipId, table.benchId)],
);

// ------------------------------------------------------------------------------------- audits, corrections, long work

/** Work that takes long. One process claims a row; what it claimed and left is taken up again. */
export const jobs = sqliteTable(
  'jobs',
  {
    id: id(),
    /** Names what is to be done; `server/jobs/job-kinds.ts` knows how. */
    kind: text().notNull(),
    input: text({ mode: 'json' }).$type<unknown>().notNull(),
    state: text({ enum: ['queued', 'running', 'done', 'failed', 'cancelled'] })
      .notNull()
      .default('queued'),
    /** How much of how much; in what unit the kind says. */
    done: integer().notNull().default(0),
    total: integer().notNull().default(0),
    /** Why it failed, in a sentence. */
    problem: text(),
    startedById: text()
      .notNull()
      .references(() => users.id),
    /** Null for work on the bank, which belongs to the team. */
    courseId: text().references(() => courses.id),
    cancelAsked: integer({ mode: 'boolean' }).notNull().default(false),
    /** The process that runs it, and when that process last said so. */
    claimedBy: text(),
    aliveAt: time(),
    attempts: integer().notNull().default(0),
    createdAt: time().notNull(),
    finishedAt: time(),
  },
  (table) => [index('jobs_waiting').on(table.state, table.createdAt)],
);

/** What a key audit found in some content of a problem, which a digest names. Append-only: the newest counts. */
export const audits = sqliteTable(
  'audits',
  {
    id: id(),
    problemId: text()
      .notNull()
      .references(() => problems.id),
    /** SHA-256 of the content. */
    digest: text().notNull(),
    jobId: text()
      .notNull()
      .references(() => jobs.id),
    variants: integer().notNull(),
    findings: text({ mode: 'json' }).$type<readonly AuditFinding[]>().notNull(),
    parts: text({ mode: 'json' }).$type<readonly PartAudit[]>().notNull(),
    at: time().notNull(),
  },
  (table) => [index('audits_content').on(table.problemId, table.digest, table.at)],
);

/** Changes of key, tolerance or slips of a revision that was answered. Statement and givens are the revision's for ever. */
export const corrections = sqliteTable(
  'corrections',
  {
    id: id(),
    revisionId: text()
      .notNull()
      .references(() => revisions.id),
    partId: text().notNull(),
    /** The revision's content with this correction and those before it. */
    content: text({ mode: 'json' }).$type<ProblemContent>().notNull(),
    /** The correction that it builds on; null for the revision itself. */
    basedOnId: text(),
    /** The course in which it was asked for. */
    courseId: text()
      .notNull()
      .references(() => courses.id),
    /** For the record. */
    reason: text().notNull(),
    /** What students read in their feedback. */
    note: text().notNull(),
    state: text({ enum: ['proposed', 'confirmed', 'made', 'withdrawn'] })
      .notNull()
      .default('proposed'),
    byId: text()
      .notNull()
      .references(() => users.id),
    createdAt: time().notNull(),
    madeAt: time(),
    previewJobId: text().references(() => jobs.id),
    jobId: text().references(() => jobs.id),
    idempotencyKey: text().notNull(),
    version: version(),
  },
  (table) => [
    index('corrections_revision').on(table.revisionId, table.createdAt),
    uniqueIndex('corrections_key').on(table.revisionId, table.idempotencyKey),
  ],
);

/** Answers whose verdict or marks a correction would change, or changed. */
export const correctionChanges = sqliteTable(
  'correction_changes',
  {
    id: id(),
    correctionId: text()
      .notNull()
      .references(() => corrections.id),
    answerId: text()
      .notNull()
      .references(() => answers.id),
    before: text({ mode: 'json' }).$type<CorrectionStep>().notNull(),
    after: text({ mode: 'json' }).$type<CorrectionStep>().notNull(),
    /** What becomes of the mark: `correctionDeeds` in `shared/corrections.ts`. */
    deed: text({
      enum: ['mark replaced', 'mark given', 'returned to the pile', 'another look', 'check alone'],
    }).notNull(),
  },
  (table) => [
    uniqueIndex('correction_changes_answer').on(table.correctionId, table.answerId),
    index('correction_changes_of').on(table.answerId),
  ],
);

// ---------------------------------------------------------------------------------------------------- mail and record

/** Letters to be sent, or kept for the administrator to read. Never holds the secret part of a link. */
export const letters = sqliteTable(
  'letters',
  {
    id: id(),
    kind: text().notNull(),
    userId: text()
      .notNull()
      .references(() => users.id),
    subject: text().notNull(),
    /** Plain text; `{link}` stands where a secret link is filled in when the letter leaves. */
    text: text().notNull(),
    createdAt: time().notNull(),
    /** Not before. */
    dueAt: time().notNull(),
    /** Null while it waits. */
    sentAt: time(),
    attempts: integer().notNull().default(0),
    lastError: text(),
    cancelledAt: time(),
  },
  (table) => [index('letters_waiting').on(table.sentAt, table.dueAt)],
);

/** Who did what, when, to what, from what, to what. Append-only (a trigger refuses update and delete). */
export const record = sqliteTable(
  'record',
  {
    id: id(),
    at: time().notNull(),
    /** Null: the server itself. */
    actorId: text().references(() => users.id),
    courseId: text().references(() => courses.id),
    /** A past-tense fact, for example `mark changed`. */
    action: text().notNull(),
    /** What it was done to: a table's word and an id. */
    thing: text().notNull(),
    thingId: text().notNull(),
    /** One sentence in words, without personal data beyond names of colleagues. */
    sentence: text().notNull(),
    before: text({ mode: 'json' }),
    after: text({ mode: 'json' }),
    reason: text(),
  },
  (table) => [
    index('record_course').on(table.courseId, table.at),
    index('record_thing').on(table.thing, table.thingId),
  ],
);
