import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import {
  audits,
  correctionChanges,
  corrections,
  jobs,
  marks,
  revisions,
  rulingAnswers,
  rulings,
  setProblems,
  sets,
} from '@drizzle/schema';
import type { Held } from '@shared/marking';
import { setStageNames, type SetStage } from '@shared/primitives';
import type { ProblemContent } from '@shared/problems';
import { pathOf } from '@shared/route';
import { newId } from '../http/new-id';
import type { Emitted } from '../live/live';
import { studentsRoom } from '../live/rooms';
import { buildCheck, buildContent, buildPile } from '../marking/testing/build-pile';
import { createHarness, type Harness } from '../testing/harness';

/** What no student may ever see before their feedback: nothing else in the world looks like these. */
const planted = {
  keyConstant: '0.7310573519',
  keyValue: '2.9242294076',
  ratio: '1.3678798',
  slipName: 'planted slip name',
  slipExpression: '0.5271839462',
  slipFeedback: 'planted slip feedback',
  tolerance: '0.0192837465',
  guidance: 'planted guidance',
  relation: 'planted relation',
  remark: 'planted remark',
  otherAnswer: '4.0000271828',
  setAside: 'planted reason',
  marker: 'Planted Marker',
  correctionReason: 'planted reason of a correction',
  correctionNote: 'planted note to students',
  auditFinding: 'planted finding of an audit',
  question: 'planted question about a ruling',
  decision: 'planted decision of a ruling',
} as const;

const secrets = Object.values(planted);

let harness: Harness;
let courseId: string;
let told: Emitted[];

beforeEach(() => {
  harness = createHarness();
  courseId = harness.makeCourse().id;
  told = [];
  harness.context.live.observe((emitted) => told.push(emitted));
});
afterEach(() => harness.close());

function plantedContent(): ProblemContent {
  const content = buildContent();
  const [part] = content.parts;
  if (!part) throw new Error('The content has no part.');
  return {
    ...content,
    parts: [
      {
        ...part,
        answer: {
          form: 'number',
          key: `nbar * ${planted.keyConstant}`,
          tolerance: { relative: Number(planted.tolerance) },
          slips: [
            {
              name: planted.slipName,
              expression: `nbar * ${planted.slipExpression}`,
              feedback: planted.slipFeedback,
              fraction: 0.5,
            },
          ],
        },
        criteria: part.criteria.map((criterion) => ({ ...criterion, guidance: planted.guidance })),
      },
    ],
  };
}

const plantedCheck = (text: string) =>
  buildCheck(4, {
    verdict: 'slip',
    slip: 0,
    readAs: text,
    relation: { name: planted.relation, factor: Number(planted.ratio) },
    key: { value: Number(planted.keyValue), method: 'algebra' },
  });

/** A set with two scripts, one of them marked by a colleague, and everything that could be asked for. */
function plantedSet(stage: SetStage) {
  const built = buildPile(harness, {
    courseId,
    stage,
    content: plantedContent(),
    values: [plantedCheck('4.1'), plantedCheck(planted.otherAnswer)],
  });
  const marker = harness.makeMember(courseId, 'marker', { name: planted.marker });
  plantRuling(built.pileId, built.handedIn[0]?.answerId ?? '', marker.membershipId);
  return { ...built, marker, ...plantedCorrection(built) };
}

/** A ruling on the part, about the answer of a student who looks around. */
function plantRuling(pileId: string, answerId: string, byId: string): void {
  const { db, clock } = harness;
  const [rulingId, at] = [newId(), clock.now()];
  db.insert(rulings)
    .values({
      id: rulingId,
      pileId,
      question: planted.question,
      askedById: byId,
      askedAt: at,
      decision: planted.decision,
      decidedById: byId,
      decidedAt: at,
      idempotencyKey: newId(),
    })
    .run();
  db.insert(rulingAnswers).values({ id: newId(), rulingId, answerId, byId, at }).run();
}

/** A correction that was made of the set's problem, an audit of it, and the job behind both. */
function plantedCorrection({ setProblemId, problemId, part, handedIn }: ReturnType<typeof buildPile>) {
  const { db, clock } = harness;
  const lead = harness.makeMember(courseId, 'lead', { name: planted.marker });
  const revision = db.select().from(revisions).where(eq(revisions.problemId, problemId)).get();
  if (!revision) throw new Error('The problem has no revision.');
  const [jobId, correctionId, createdAt] = [newId(), newId(), clock.now() + 1];
  db.insert(jobs)
    .values({ id: jobId, kind: 'key audit', input: revision.content, state: 'done', startedById: lead.id, createdAt })
    .run();
  db.insert(audits)
    .values({
      id: newId(),
      problemId,
      digest: 'd',
      jobId,
      variants: 1,
      findings: [
        {
          kind: 'slip equals key',
          grade: 'stops use',
          part: 0,
          sentence: planted.auditFinding,
          variant: null,
          count: 1,
        },
      ],
      parts: [],
      at: createdAt,
    })
    .run();
  db.insert(corrections)
    .values({
      id: correctionId,
      revisionId: revision.id,
      partId: part.id,
      content: revision.content,
      courseId,
      reason: planted.correctionReason,
      note: planted.correctionNote,
      state: 'made',
      byId: lead.id,
      createdAt,
      madeAt: createdAt,
      previewJobId: jobId,
      jobId,
      idempotencyKey: newId(),
    })
    .run();
  db.insert(correctionChanges)
    .values({
      id: newId(),
      correctionId,
      answerId: handedIn[0]?.answerId ?? '',
      before: { verdict: 'wrong', relation: planted.relation, total: 0 },
      after: { verdict: 'slip', relation: planted.slipName, total: 1 },
      deed: 'mark replaced',
    })
    .run();
  db.update(setProblems).set({ correctionId }).where(eq(setProblems.id, setProblemId)).run();
  return { jobId, correctionId };
}

/** Every way that a GET route's address can be filled in with what there is. A route with a new parameter must be added here. */
function addressesOf(built: ReturnType<typeof plantedSet>): string[] {
  const ids: Readonly<Record<string, readonly string[]>> = {
    courseId: [courseId],
    setId: [built.setId],
    pileId: [built.pileId],
    answerId: built.handedIn.map((each) => each.answerId),
    problemId: [built.problemId],
    number: ['1'],
    membershipId: [built.handedIn[0]?.student.membershipId ?? '', built.marker.membershipId],
    userId: [built.marker.id],
    jobId: [built.jobId],
    correctionId: [built.correctionId],
    queryId: [newId()],
    address: ['0'.repeat(43)],
    pageId: [newId()],
    stage: setStageNames,
  };
  return harness.serve.routes
    .filter((route) => route.method === 'GET')
    .flatMap((route) => {
      const names = [...route.path.matchAll(/:([A-Za-z]+)/g)].map((match) => match[1] ?? '');
      return names
        .reduce<Record<string, string>[]>(
          (filled, name) => {
            const values = ids[name];
            if (!values) throw new Error(`Say in this test what :${name} of ${route.path} can be.`);
            return filled.flatMap((params) => values.map((value) => ({ ...params, [name]: value })));
          },
          [{}],
        )
        .map((params) => `/api${pathOf(route, params)}`);
    });
}

function expectNoSecret(text: string, where: string): void {
  for (const secret of secrets) expect(text.includes(secret), `${secret} in ${where}`).toBe(false);
}

describe('before the release, no key, slip, tolerance or guidance', () => {
  it.each(['ready', 'open', 'closed', 'marking', 'moderation'] as const)(
    'is in any answer that a student gets while the set is %s',
    async (stage) => {
      const built = plantedSet(stage);
      const student = await harness.agent(built.handedIn[0]?.student ?? null);
      const addresses = addressesOf(built);
      expect(addresses.length).toBeGreaterThan(20);
      const answered: string[] = [];
      for (const address of addresses) {
        const response = await student.get(address);
        if (response.status === 200) answered.push(address);
        expect(response.status, address).not.toBe(500);
        expectNoSecret(response.text, `${address} (${String(response.status)})`);
      }
      // The walk is worth something only where doors open.
      expect(answered).toContain(`/api/courses/${courseId}/sheets`);
      if (stage !== 'ready') expect(answered).toContain(`/api/sets/${built.setId}/sheet`);
    },
  );

  it('is in any answer to what a student does', async () => {
    const built = plantedSet('open');
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    const answerId = built.handedIn[0]?.answerId ?? '';
    const acts = [
      student
        .put(`/api/answers/${answerId}/text`)
        .set('If-Match', '"0"')
        .set('Idempotency-Key', newId())
        .send({ text: '4' }),
      student.post(`/api/sets/${built.setId}/submissions`).set('Idempotency-Key', newId()).send({}),
      student.post(`/api/piles/${built.pileId}/holds`).send({ benchId: newId() }),
      student
        .post(`/api/answers/${answerId}/marks`)
        .set('If-Match', '"1"')
        .set('Idempotency-Key', newId())
        .send({ benchId: newId(), criteria: [] }),
      student.post(`/api/sets/${built.setId}/release`).set('If-Match', '"1"').send({}),
    ];
    for (const act of acts) {
      const response = await act;
      expectNoSecret(response.text, response.request.url);
    }
  });

  it('is in any live event, and students hear of nothing but stages', async () => {
    const built = plantedSet('marking');
    const marker = await harness.agent(built.marker);
    const benchId = newId();
    const held = (await marker.post(`/api/piles/${built.pileId}/holds`).send({ benchId }).expect(200)).body as Held;
    const criteria = built.part.criteria.map(({ id }) => ({ criterionId: id, awarded: true }));
    const marked = await marker
      .post(`/api/answers/${held.inHand ?? ''}/marks`)
      .set('If-Match', '"1"')
      .set('Idempotency-Key', newId())
      .send({ benchId, criteria, remark: planted.remark })
      .expect(201);
    await marker
      .post(`/api/answers/${(marked.body as { held: Held }).held.inHand ?? ''}/set-aside`)
      .set('If-Match', '"1"')
      .send({ benchId, reason: planted.setAside })
      .expect(200);
    const lead = await harness.agent(harness.makeMember(courseId, 'lead'));
    await lead.post(`/api/sets/${built.setId}/stage`).set('If-Match', '"1"').send({ stage: 'moderation' }).expect(200);
    expect(told.length).toBeGreaterThan(4);

    const names = secrets.filter((secret) => secret !== planted.marker);
    for (const { event, body } of told) {
      const text = JSON.stringify(body);
      for (const secret of names) expect(text.includes(secret), `${secret} in ${event}`).toBe(false);
      for (const { student, scriptId } of built.handedIn)
        for (const id of [student.id, student.membershipId, student.name, scriptId])
          expect(text.includes(id), `a student in ${event}`).toBe(false);
    }
    for (const { rooms, event } of told.filter((each) => each.rooms.includes(studentsRoom(courseId)))) {
      expect(event).toBe('stageChanged');
      expect(rooms).toContain(studentsRoom(courseId));
    }
  });
});

describe('after the release', () => {
  it('a student reads their own key and slip, and still no guidance, tolerance, marker or other student', async () => {
    const built = plantedSet('marking');
    for (const { answerId } of built.handedIn) {
      const id = newId();
      const criteria = built.part.criteria.map((each) => ({ criterionId: each.id, awarded: false }));
      const row = {
        id,
        answerId,
        kind: 'first' as const,
        markerId: built.marker.membershipId,
        criteria,
        total: 0,
        at: 1,
        idempotencyKey: newId(),
      };
      harness.db.insert(marks).values(row).run();
    }
    harness.db.update(sets).set({ stage: 'released' }).where(eq(sets.id, built.setId)).run();
    const student = await harness.agent(built.handedIn[0]?.student ?? null);
    const own = await student.get(`/api/sets/${built.setId}/feedback`).expect(200);
    for (const seen of [planted.keyValue, planted.slipName, planted.slipFeedback, planted.correctionNote])
      expect(own.text).toContain(seen);

    const never = [
      planted.keyConstant,
      planted.slipExpression,
      planted.tolerance,
      planted.guidance,
      planted.otherAnswer,
      planted.marker,
      planted.correctionReason,
      planted.auditFinding,
    ];
    const others = [
      built.marker.id,
      built.marker.membershipId,
      built.handedIn[1]?.code ?? '?',
      built.handedIn[1]?.answerId ?? '?',
    ];
    for (const address of addressesOf(built)) {
      const { text } = await student.get(address);
      for (const secret of [...never, ...others]) {
        // What was asked for by its id may be named in the refusal.
        if (address.includes(secret)) continue;
        expect(text.includes(secret), `${secret} in ${address}`).toBe(false);
      }
    }
  });
});
