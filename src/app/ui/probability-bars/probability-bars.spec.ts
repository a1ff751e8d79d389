import { TestBed } from '@angular/core/testing';
import { ProbabilityBars } from './probability-bars';

async function show(inputs: Readonly<Record<string, unknown>>) {
  const fixture = TestBed.createComponent(ProbabilityBars);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  return fixture.nativeElement as HTMLElement;
}

describe('ProbabilityBars', () => {
  it('reads the distribution out', async () => {
    const element = await show({ probabilities: [0.3012, 0.3614, 0.2169], label: 'P(n) at output 2' });
    expect(element.querySelector('svg')?.getAttribute('aria-label')).toBe(
      'P(n) at output 2. 0: 0.301; 1: 0.361; 2: 0.217',
    );
  });

  it('cuts a long tail of next to nothing, never the key', async () => {
    const probabilities = Array.from({ length: 60 }, (_, n) => 0.5 ** (n + 1));
    expect((await show({ probabilities })).querySelectorAll('rect')).toHaveLength(10);
    expect((await show({ probabilities, highlight: 20 })).querySelectorAll('rect')).toHaveLength(21);
  });

  it('stands without a bar where nothing is likely', async () => {
    expect((await show({ probabilities: [] })).querySelectorAll('rect')).toHaveLength(0);
  });
});
