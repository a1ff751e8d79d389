import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import type { Job } from '@shared/jobs';
import { provideLook } from '../look';
import { JobProgress } from './job-progress';
import { JobProgressHarness } from './testing/job-progress-harness';

const job = (more: Partial<Job>): Job => ({
  id: '8f9c1b6e-0a1d-4a67-9c11-0d3a2c7b5e10',
  kind: 'key audit',
  state: 'running',
  done: 0,
  total: 0,
  problem: null,
  createdAt: 1,
  finishedAt: null,
  ...more,
});

async function show(shown: Job) {
  TestBed.configureTestingModule({ providers: [provideLook()] });
  const fixture = TestBed.createComponent(JobProgress);
  fixture.componentRef.setInput('job', shown);
  fixture.componentRef.setInput('words', 'Auditing the keys');
  fixture.componentRef.setInput('things', 'variants');
  let cancelled = 0;
  fixture.componentInstance.cancelled.subscribe(() => cancelled++);
  const harness = await TestbedHarnessEnvironment.harnessForFixture(fixture, JobProgressHarness);
  return { harness, cancelled: () => cancelled };
}

describe('JobProgress', () => {
  it('tells how far the work is, and cancels it', async () => {
    const { harness, cancelled } = await show(job({ done: 120, total: 500 }));
    expect(await harness.text()).toContain('120 of 500 variants');
    expect(await harness.progress()).toEqual({ done: 120, total: 500 });
    await harness.cancel();
    expect(cancelled()).toBe(1);
  });

  it('has a line without an end while that is not known', async () => {
    const { harness } = await show(job({ state: 'queued' }));
    expect(await harness.text()).toContain('Auditing the keys');
    expect(await harness.progress()).toBeNull();
  });

  it('says why it failed, and is silent once it is done', async () => {
    const { harness } = await show(job({ state: 'failed', problem: 'The set is gone.' }));
    expect(await harness.text()).toContain('The set is gone.');
    await expect(harness.cancel()).rejects.toThrow();
  });

  it('says that it was cancelled', async () => {
    expect(await (await show(job({ state: 'cancelled' }))).harness.text()).toContain('Nothing was changed');
  });

  it('is silent once it is done', async () => {
    expect(await (await show(job({ state: 'done' }))).harness.text()).toBe('');
  });
});
