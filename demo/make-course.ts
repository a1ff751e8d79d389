import { readdirSync, readFileSync } from 'node:fs';
import { basename, join } from 'node:path';
import { eq } from 'drizzle-orm';
import { courses, memberships, users } from '@drizzle/schema';
import type { ProblemContent } from '@shared/problems';
import type { SignedIn } from '../server/access/policy';
import { hashPassword } from '../server/accounts/secrets';
import type { Context } from '../server/context';
import { joinCourse } from '../server/courses/members';
import { newId } from '../server/http/new-id';
import { auditForUse } from '../server/problems/audit-rules';
import { readProblemFile } from '../server/problems/problem-file';
import { createFromContent, makeRevision, setProblemStatus } from '../server/problems/problem-rules';
import { signOff } from './review-problem';
import { administrator, demonstrationPassword, lead, markers, students, type DemonstrationPerson } from './accounts';
import { timeZone } from './demo-clock';

/** Everybody of the demonstration, signed in, so to say. */
export interface DemonstrationPeople {
  readonly courseId: string;
  readonly lead: SignedIn;
  readonly markers: readonly SignedIn[];
  readonly students: readonly SignedIn[];
}

/** Makes the course and its people, all with the password that is printed. */
export async function makeCourse(context: Context, studentCount: number): Promise<DemonstrationPeople> {
  const { db, clock } = context;
  const passwordHash = await hashPassword(demonstrationPassword);
  const courseId = newId();
  return db.transaction((tx) => {
    tx.insert(courses)
      .values({ id: courseId, title: 'Counting light', term: 'winter term', timeZone, createdAt: clock.now() })
      .run();
    const { name, email } = administrator;
    tx.insert(users)
      .values({ id: newId(), name, email, passwordHash, isAdministrator: true, createdAt: clock.now() })
      .run();
    const join = (person: DemonstrationPerson): SignedIn => {
      if (person.role === 'administrator') throw new Error('An administrator has no place in the course.');
      const { userId, membershipId } = joinCourse(tx, courseId, { ...person, role: person.role }, clock.now());
      tx.update(users).set({ passwordHash }).where(eq(users.id, userId)).run();
      const row = tx.select().from(memberships).where(eq(memberships.id, membershipId)).get();
      if (!row) throw new Error('A person who joined is not there.');
      return {
        id: userId,
        name: person.name,
        isAdministrator: false,
        sessionId: '',
        memberships: new Map([[courseId, { id: row.id, courseId, role: row.role }]]),
      };
    };
    return {
      courseId,
      lead: join(lead),
      markers: markers.map(join),
      students: students.slice(0, studentCount).map(join),
    };
  });
}

/** A problem of the demonstration in the bank. */
export interface DemonstrationProblem {
  /** The name of its file. */
  readonly name: string;
  readonly problemId: string;
  readonly revisionId: string;
  readonly content: ProblemContent;
}

/**
 * Reads the problems of one set from their files into the bank, and makes their first revisions; those that are to be
 * ready are signed off by a marker first.
 */
export async function addProblems(
  context: Context,
  { lead: author, markers: colleagues }: DemonstrationPeople,
  folder: string,
  status: 'ready' | 'in review',
): Promise<DemonstrationProblem[]> {
  const { db, keys, clock } = context;
  const path = join('demo', 'course', folder);
  const made: DemonstrationProblem[] = [];
  for (const file of readdirSync(path).sort()) {
    const content = readProblemFile(readFileSync(join(path, file), 'utf8'));
    const deed = { personId: author.id, now: clock.now() };
    const { id: problemId, version } = createFromContent(db, content, deed);
    const revised = await makeRevision(db, keys, problemId, { reason: 'First wording', version }, deed);
    const reviewed = setProblemStatus(db, problemId, { status: 'in review', version: revised.version }, deed);
    if (status === 'ready') {
      const colleague = colleagues[made.length % colleagues.length];
      if (!colleague) throw new Error('Nobody can sign off a problem.');
      await auditForUse(context, problemId, author.id);
      const now = signOff(context, { author, colleague, problemId });
      setProblemStatus(db, problemId, { status, version: reviewed.version }, { ...deed, now });
    }
    if (!revised.latestRevision) throw new Error('A revision that was made is not there.');
    made.push({ name: basename(file, '.md'), problemId, revisionId: revised.latestRevision.id, content });
  }
  return made;
}
