import { TestBed } from '@angular/core/testing';
import { type Observable, Subject, of, throwError } from 'rxjs';
import { emptyDraft, type ProblemDraft } from '@shared/problem-draft';
import type { ProblemDetail } from '@shared/problem-routes';
import { defaultConvention } from '@shared/primitives';
import type { ErrorType } from '@shared/problem-details';
import { ProblemsApi } from '../../core/api/problems-api';
import { RequestFailure } from '../../core/api/request-failure';
import { DraftShelf } from './draft-shelf';
import { OpenProblem } from './open-problem';

const id = '8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10';

function buildDetail(overrides: Partial<ProblemDetail> = {}): ProblemDetail {
  return {
    id,
    title: 'A splitter',
    status: 'draft',
    author: 'Mara Lindqvist',
    tags: [],
    parts: 0,
    marks: 0,
    latestRevision: null,
    changed: true,
    savedAt: 0,
    version: 1,
    draft: emptyDraft('A splitter', defaultConvention),
    mine: true,
    nextStatuses: [],
    ...overrides,
  };
}

function failure(status: number, type: ErrorType, current?: unknown) {
  return throwError(() => new RequestFailure({ type, title: '', status, detail: 'Why.', current }));
}

function setUp(saveDraft: (problemId: string, version: number, draft: ProblemDraft) => Observable<ProblemDetail>) {
  const calls: { version: number; title: string }[] = [];
  const api = {
    problem: () => of(buildDetail()),
    saveDraft: (problemId: string, version: number, draft: ProblemDraft) => {
      calls.push({ version, title: draft.title });
      return saveDraft(problemId, version, draft);
    },
  };
  TestBed.configureTestingModule({ providers: [OpenProblem, { provide: ProblemsApi, useValue: api }] });
  const open = TestBed.inject(OpenProblem);
  const type = (title: string) => open.change((draft) => ({ ...draft, title }));
  return { open, calls, type, shelf: TestBed.inject(DraftShelf) };
}

const acknowledge = (_: string, version: number, draft: ProblemDraft) =>
  of(buildDetail({ version: version + 1, draft, title: draft.title }));

describe('OpenProblem', () => {
  beforeEach(() => {
    vi.useFakeTimers();
    localStorage.clear();
  });
  afterEach(() => vi.useRealTimers());

  it('keeps the draft once typing rests, with the version it changes', async () => {
    const { open, calls, type, shelf } = setUp(acknowledge);
    await open.load(id);
    type('A');
    type('A mirror');
    expect(open.keeping().state).toBe('typing');
    expect(shelf.take(id)?.draft.title).toBe('A mirror');
    await vi.advanceTimersByTimeAsync(1000);
    expect(calls).toEqual([{ version: 1, title: 'A mirror' }]);
    expect(open.keeping().state).toBe('kept');
    expect(open.detail()?.version).toBe(2);
    expect(shelf.take(id)).toBeNull();
  });

  it('keeps at least every few seconds while typing goes on', async () => {
    const { open, calls, type } = setUp(acknowledge);
    await open.load(id);
    for (let count = 0; count < 20; count++) {
      type(`A ${String(count)}`);
      await vi.advanceTimersByTimeAsync(300);
    }
    expect(calls.length).toBeGreaterThanOrEqual(1);
  });

  it('keeps what was typed while an earlier save was on its way', async () => {
    const answer = new Subject<ProblemDetail>();
    let isFirst = true;
    const { open, calls, type } = setUp((problemId, version, draft) => {
      if (!isFirst) return acknowledge(problemId, version, draft);
      isFirst = false;
      return answer;
    });
    await open.load(id);
    type('first');
    await vi.advanceTimersByTimeAsync(800);
    type('second');
    answer.next(buildDetail({ version: 2 }));
    answer.complete();
    await vi.advanceTimersByTimeAsync(2000);
    expect(calls).toEqual([
      { version: 1, title: 'first' },
      { version: 2, title: 'second' },
    ]);
    expect(open.draft()?.title).toBe('second');
  });

  it('tries again while the server is away, and says that the draft is in this browser', async () => {
    let isAway = true;
    const { open, calls, type, shelf } = setUp((...call) =>
      isAway ? failure(0, '/errors/unexpected') : acknowledge(...call),
    );
    await open.load(id);
    type('A mirror');
    await vi.advanceTimersByTimeAsync(800);
    expect(open.keeping()).toEqual({ state: 'not kept', why: 'Why.' });
    expect(shelf.take(id)?.draft.title).toBe('A mirror');
    isAway = false;
    await vi.advanceTimersByTimeAsync(2500);
    expect(open.keeping().state).toBe('kept');
    expect(calls).toHaveLength(2);
  });

  it('offers both states where somebody else saved first', async () => {
    const theirs = buildDetail({ version: 5, draft: emptyDraft('Theirs', defaultConvention) });
    const { open, calls, type } = setUp((problemId, version, draft) =>
      version === 5 ? acknowledge(problemId, version, draft) : failure(412, '/errors/stale', theirs),
    );
    await open.load(id);
    type('Mine');
    await vi.advanceTimersByTimeAsync(800);
    expect(open.other()?.draft.title).toBe('Theirs');
    expect(open.draft()?.title).toBe('Mine');
    expect(open.canEdit()).toBe(false);
    await open.goOnWithMine();
    expect(calls.at(-1)).toEqual({ version: 5, title: 'Mine' });
    expect(open.other()).toBeNull();
  });

  it('takes theirs where that is chosen', async () => {
    const theirs = buildDetail({ version: 5, draft: emptyDraft('Theirs', defaultConvention) });
    const { open, type, shelf } = setUp(() => failure(412, '/errors/stale', theirs));
    await open.load(id);
    type('Mine');
    await vi.advanceTimersByTimeAsync(800);
    open.goOnWithTheirs();
    expect(open.draft()?.title).toBe('Theirs');
    expect(shelf.take(id)).toBeNull();
  });

  it('takes up what an earlier visit could not keep', async () => {
    const { open, calls, shelf } = setUp(acknowledge);
    shelf.put(id, 1, emptyDraft('From yesterday', defaultConvention));
    await open.load(id);
    expect(open.draft()?.title).toBe('From yesterday');
    await vi.advanceTimersByTimeAsync(1000);
    expect(calls).toEqual([{ version: 1, title: 'From yesterday' }]);
  });

  it('asks where what an earlier visit typed has been overtaken', async () => {
    const { open, shelf } = setUp(acknowledge);
    shelf.put(id, 0, emptyDraft('From yesterday', defaultConvention));
    await open.load(id);
    expect(open.draft()?.title).toBe('From yesterday');
    expect(open.other()?.draft.title).toBe('A splitter');
  });

  it('shows what an empty field lacks only when a revision was asked for', async () => {
    const { open } = setUp(acknowledge);
    await open.load(id);
    expect(open.faultAt('', 'statement')).toBe('');
    await open.makeRevision('first');
    expect(open.faultAt('', 'statement')).toBe('Write the statement.');
  });
});
