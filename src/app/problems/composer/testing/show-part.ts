import { type Type } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { provideRouter } from '@angular/router';
import { of } from 'rxjs';
import { defaultConvention } from '@shared/primitives';
import { emptyDraft, emptyPart, type DraftAnswer } from '@shared/problem-draft';
import type { SampledVariant } from '@shared/problem-routes';
import { ProblemsApi } from '../../../core/api/problems-api';
import { provideLook } from '../../../ui/look';
import type { KeyNames } from '../key-language';
import { OpenProblem } from '../open-problem';
import { SampleVariants } from '../sample-variants';

const ids = ['8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10', '1d2f3a4b-5c6d-4e7f-8a9b-0c1d2e3f4a5b'] as const;
/** Nothing to complete. */
export const noNames: KeyNames = { values: [], functions: [] };

/**
 * For tests: a component of the composer that shows one part, of a problem that is open.
 *
 * @param answer what of the part's answer is typed
 * @param more sample variants that the server gives, further answers of its api, and inputs
 */
export async function showPart<Component>(
  component: Type<Component>,
  answer: Partial<DraftAnswer>,
  more: {
    readonly variants?: readonly SampledVariant[];
    readonly api?: object;
    readonly names?: KeyNames;
  } = {},
) {
  const part = emptyPart(...ids);
  const draft = {
    ...emptyDraft('A splitter', defaultConvention),
    parts: [{ ...part, answer: { ...part.answer, ...answer } }],
  };
  const detail = { id: ids[0], version: 1, draft, status: 'draft', latestRevision: null, nextStatuses: [] };
  const api = {
    problem: () => of(detail),
    saveDraft: () => of(detail),
    sampleProblem: () => of({ count: 1, variants: more.variants ?? [], faults: [] }),
    ...more.api,
  };
  TestBed.configureTestingModule({
    providers: [provideLook(), provideRouter([]), OpenProblem, SampleVariants, { provide: ProblemsApi, useValue: api }],
  });
  const open = TestBed.inject(OpenProblem);
  await open.load(ids[0]);
  const fixture = TestBed.createComponent(component);
  const sync = async () => {
    fixture.componentRef.setInput('index', 0);
    fixture.componentRef.setInput('part', open.draft()?.parts[0]);
    if (more.names) fixture.componentRef.setInput('names', more.names);
    await fixture.whenStable();
  };
  await sync();
  const root = fixture.nativeElement as HTMLElement;
  return { open, sync, root, answer: () => open.draft()?.parts[0]?.answer };
}
