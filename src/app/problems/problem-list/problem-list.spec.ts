import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { provideRouter, withComponentInputBinding } from '@angular/router';
import { RouterTestingHarness } from '@angular/router/testing';
import { type Observable, of, throwError } from 'rxjs';
import type { ProblemSummary } from '@shared/problems';
import { ProblemsApi } from '../../core/api/problems-api';
import { RequestFailure } from '../../core/api/request-failure';
import { provideLook } from '../../ui/look';
import ProblemList from './problem-list';

const summary: ProblemSummary = {
  id: '8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10',
  title: 'Two outputs of one mirror',
  status: 'ready',
  author: 'Mara Lindqvist',
  tags: ['beam splitters'],
  parts: 2,
  marks: 4,
  latestRevision: null,
  changed: true,
  savedAt: Date.UTC(2026, 10, 24, 14, 36),
  version: 3,
};

interface Page {
  readonly items: ProblemSummary[];
  readonly total: number;
}

async function show(address: string, problems: () => Observable<Page>) {
  const queries: unknown[] = [];
  const api = {
    problems: (query: unknown) => {
      queries.push(query);
      return problems();
    },
  };
  TestBed.configureTestingModule({
    providers: [
      provideLook(),
      provideRouter([{ path: 'courses/:courseId/problems', component: ProblemList }], withComponentInputBinding()),
      { provide: ProblemsApi, useValue: api },
    ],
  });
  const harness = await RouterTestingHarness.create(`/courses/1/problems${address}`);
  await harness.fixture.whenStable();
  const text = () => (harness.routeNativeElement?.textContent ?? '').replace(/\s+/g, ' ');
  return { queries, text, loader: TestbedHarnessEnvironment.loader(harness.fixture), fixture: harness.fixture };
}

describe('ProblemList', () => {
  it('shows each problem with its state, marks and revision', async () => {
    const { text } = await show('', () => of({ items: [summary], total: 1 }));
    expect(text()).toContain('Two outputs of one mirror');
    expect(text()).toContain('2 parts, 4 marks');
    expect(text()).toContain('no revision yet');
    expect(text()).toContain('1 problem');
  });

  it('takes its filter from the address', async () => {
    const { queries } = await show('?search=mirror&status=ready&page=2', () => of({ items: [summary], total: 51 }));
    expect(queries).toEqual([{ search: 'mirror', status: 'ready', page: 2 }]);
  });

  it('says what to do where there is nothing', async () => {
    const { text, loader, fixture } = await show('', () => of({ items: [], total: 0 }));
    expect(text()).toContain('Write the first');
    const [button] = await loader.getAllHarnesses(MatButtonHarness.with({ text: /New problem/ }));
    await button?.click();
    await fixture.whenStable();
    expect(text()).toContain('Title of the new problem');
  });

  it('clears a filter that nothing fits', async () => {
    const { text, loader, queries, fixture } = await show('?search=wombat', () => of({ items: [], total: 0 }));
    expect(text()).toContain('No problem fits');
    await (await loader.getHarness(MatButtonHarness.with({ text: 'Show all problems' }))).click();
    await fixture.whenStable();
    expect(queries.at(-1)).toEqual({ search: '', status: undefined, page: 1 });
  });

  it('says what went wrong, and tries again', async () => {
    let fails = true;
    const failure = new RequestFailure({ type: '/errors/unexpected', title: '', status: 500, detail: 'Try again.' });
    const { text, loader, fixture } = await show('', () =>
      fails ? throwError(() => failure) : of({ items: [summary], total: 1 }),
    );
    expect(text()).toContain('Try again.');
    fails = false;
    await (await loader.getHarness(MatButtonHarness.with({ text: 'Try again' }))).click();
    await fixture.whenStable();
    expect(text()).toContain('Two outputs of one mirror');
  });

  it('asks for a title before it begins a problem', async () => {
    const { text, loader, fixture } = await show('', () => of({ items: [summary], total: 1 }));
    await (await loader.getHarness(MatButtonHarness.with({ text: /New problem/ }))).click();
    await (await loader.getHarness(MatButtonHarness.with({ text: 'Begin' }))).click();
    await fixture.whenStable();
    expect(text()).toContain('Give the problem a title');
  });
});
