import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { StageLine } from './stage-line';
import { StageLineHarness } from './testing/stage-line-harness';

const stages = [
  { name: 'draft', date: '12 Oct' },
  { name: 'open', date: '2 Nov' },
  { name: 'marking', date: '30 Nov' },
  { name: 'released' },
];

async function show(inputs: Readonly<Record<string, unknown>>) {
  const fixture = TestBed.createComponent(StageLine);
  for (const [name, value] of Object.entries({ stages, present: 1, ...inputs })) {
    fixture.componentRef.setInput(name, value);
  }
  await fixture.whenStable();
  return TestbedHarnessEnvironment.harnessForFixture(fixture, StageLineHarness);
}

describe('StageLine', () => {
  it('says where the set stands and what is next', async () => {
    const line = await show({ label: 'Set 4' });
    expect(await line.getSentence()).toBe('Set 4: now open since 2 Nov; next marking, 30 Nov');
  });

  it('prints dates, and the present stage in words', async () => {
    expect(await (await show({})).getLabels()).toEqual(['12 Oct', 'open', '30 Nov']);
  });

  it('prints the names above on demand', async () => {
    const labels = await (await show({ names: true })).getLabels();
    expect(labels).toContain('draft');
    expect(labels).toContain('released');
  });

  it('ends without anything next', async () => {
    expect(await (await show({ present: 3 })).getSentence()).toBe('now released; nothing further');
  });
});
