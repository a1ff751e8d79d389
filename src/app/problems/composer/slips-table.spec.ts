import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { of } from 'rxjs';
import { emptyDraft, emptyPart } from '@shared/problem-draft';
import { defaultConvention } from '@shared/primitives';
import { ProblemsApi } from '../../core/api/problems-api';
import { provideLook } from '../../ui/look';
import { OpenProblem } from './open-problem';
import { SampleVariants } from './sample-variants';
import { SlipsTable } from './slips-table';

const ids = ['8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10', '1d2f3a4b-5c6d-4e7f-8a9b-0c1d2e3f4a5b'] as const;

async function show() {
  const draft = { ...emptyDraft('A splitter', defaultConvention), parts: [emptyPart(...ids)] };
  const detail = { id: ids[0], version: 1, draft, status: 'draft', latestRevision: null, nextStatuses: [] };
  const api = {
    problem: () => of(detail),
    saveDraft: () => of(detail),
    sampleProblem: () => of({ count: 1, variants: [], faults: [] }),
  };
  TestBed.configureTestingModule({
    providers: [provideLook(), OpenProblem, SampleVariants, { provide: ProblemsApi, useValue: api }],
  });
  const open = TestBed.inject(OpenProblem);
  await open.load(ids[0]);
  const fixture = TestBed.createComponent(SlipsTable);
  const sync = async () => {
    fixture.componentRef.setInput('index', 0);
    fixture.componentRef.setInput('part', open.draft()?.parts[0]);
    fixture.componentRef.setInput('names', { values: [], functions: [] });
    await fixture.whenStable();
  };
  await sync();
  return { open, fixture, sync, loader: TestbedHarnessEnvironment.loader(fixture) };
}

describe('SlipsTable', () => {
  beforeEach(() => localStorage.clear());

  it('adds a slip, and keeps what is typed into it as it is typed', async () => {
    const { open, fixture, sync, loader } = await show();
    await (await loader.getHarness(MatButtonHarness.with({ text: /Slip/ }))).click();
    await sync();
    const root = fixture.nativeElement as HTMLElement;
    const fraction = root.querySelector<HTMLInputElement>('[aria-label="Fraction of the marks for slip 1"]');
    fraction!.value = 'half';
    fraction!.dispatchEvent(new Event('input'));
    await sync();
    expect(open.draft()?.parts[0]?.answer.slips[0]?.fraction).toBe('half');
    expect(root.textContent).toContain('“half” is not a number.');
  });

  it('removes a slip', async () => {
    const { open, sync, loader } = await show();
    await (await loader.getHarness(MatButtonHarness.with({ text: /Slip/ }))).click();
    await sync();
    await (await loader.getHarness(MatButtonHarness.with({ selector: '[aria-label="Remove slip 1"]' }))).click();
    expect(open.draft()?.parts[0]?.answer.slips).toEqual([]);
  });
});
