import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { of } from 'rxjs';
import type { AuditState, KeyAudit } from '@shared/audit';
import type { Job } from '@shared/jobs';
import { emptyDraft } from '@shared/problem-draft';
import { defaultConvention } from '@shared/primitives';
import { AuditsApi } from '../../../core/api/audits-api';
import { JobsApi } from '../../../core/api/jobs-api';
import { ProblemsApi } from '../../../core/api/problems-api';
import { JobWatch } from '../../../core/job-watch';
import { provideLook } from '../../../ui/look';
import { OpenProblem } from '../open-problem';
import { AuditFindings } from './audit-findings';
import { ProblemAudit } from './problem-audit';

const id = '8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10';
const detail = {
  id,
  version: 1,
  draft: emptyDraft('A splitter', defaultConvention),
  status: 'draft',
  latestRevision: null,
};

const found: KeyAudit = {
  at: Date.UTC(2026, 10, 24, 14, 36),
  variants: 143,
  findings: [
    {
      kind: 'slip equals key',
      grade: 'stops use',
      part: 1,
      sentence: 'The slip equals the key in 13 of 143 variants.',
      variant: { number: 71, givens: 'nbar = 5.0, T = 0.50' },
      count: 13,
    },
    {
      kind: 'given without use',
      grade: 'look at this',
      part: null,
      sentence: 'No key uses r.',
      variant: null,
      count: 143,
    },
  ],
  parts: [
    { part: 0, inOrder: 'Keys finite.' },
    { part: 1, inOrder: 'Honest rounding passes.' },
  ],
};
const running: Job = {
  id,
  kind: 'key audit',
  state: 'running',
  done: 40,
  total: 143,
  problem: null,
  createdAt: 1,
  finishedAt: null,
};

/** The part with an index, of a problem whose audit stands so at first, and so once it was run. */
async function show(part: number, first: AuditState, then: AuditState = first) {
  let asked = 0;
  let begun = 0;
  const audits = {
    audit: () => of(asked++ === 0 ? first : then),
    beginAudit: () => {
      begun += 1;
      return of({ audit: null, job: running, obstacle: null });
    },
  };
  TestBed.configureTestingModule({
    providers: [
      provideLook(),
      OpenProblem,
      ProblemAudit,
      { provide: ProblemsApi, useValue: { problem: () => of(detail), saveDraft: () => of(detail) } },
      { provide: AuditsApi, useValue: audits },
      { provide: JobsApi, useValue: {} },
      { provide: JobWatch, useValue: { follow: () => of(running, { ...running, state: 'done', done: 143 }) } },
    ],
  });
  await TestBed.inject(OpenProblem).load(id);
  const fixture = TestBed.createComponent(AuditFindings);
  fixture.componentRef.setInput('part', part);
  await fixture.whenStable();
  await new Promise((resolve) => setTimeout(resolve, 20));
  await fixture.whenStable();
  return {
    audit: TestBed.inject(ProblemAudit),
    text: () => (fixture.nativeElement as HTMLElement).textContent.replace(/\s+/g, ' '),
    loader: TestbedHarnessEnvironment.loader(fixture),
    begun: () => begun,
    settle: () => fixture.whenStable(),
  };
}

const none: AuditState = { audit: null, job: null, obstacle: null };

describe('AuditFindings', () => {
  it('says what stops use, with the variant that shows it, and what is in order', async () => {
    const { text, audit } = await show(1, { ...none, audit: found });
    expect(text()).toContain('143 variants');
    expect(text()).toContain(
      'stops use The slip equals the key in 13 of 143 variants. Variant 71: nbar = 5.0, T = 0.50',
    );
    expect(text()).toMatch(/in order ?Honest rounding passes\./);
    expect(text()).toContain('look at No key uses r.');
    expect(audit.standingOf(0)).toBe('audit clean');
    expect(audit.standingOf(1)).toBe('to mend');
  });

  it('runs the audit of what is not audited as it is, and shows what it found', async () => {
    const { text, loader, begun, settle, audit } = await show(0, none, { ...none, audit: found });
    expect(text()).toContain('Not audited as it is written now');
    expect(audit.standingOf(0)).toBe('');
    await (await loader.getHarness(MatButtonHarness.with({ text: /^Run/ }))).click();
    await settle();
    expect(begun()).toBe(1);
    expect(text()).toMatch(/in order ?Keys finite\./);
  });

  it('says what stands in its way', async () => {
    const obstacle = 'The audit runs once nothing in the draft is left to mend.';
    const { text, loader } = await show(0, { ...none, obstacle });
    expect(text()).toContain(obstacle);
    expect(await (await loader.getHarness(MatButtonHarness.with({ text: /^Run/ }))).isDisabled()).toBe(true);
  });
});
