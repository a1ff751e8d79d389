import { TestBed } from '@angular/core/testing';
import { EntryBars } from './entry-bars';

async function show(inputs: Readonly<Record<string, unknown>>) {
  const fixture = TestBed.createComponent(EntryBars);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  return fixture.nativeElement as HTMLElement;
}

describe('EntryBars', () => {
  it('draws an entry each, those below zero downwards, and says them', async () => {
    const element = await show({ entries: [1, -0.5] });
    const [up, down] = [...element.querySelectorAll('rect')].map((bar) => ({
      y: Number(bar.getAttribute('y')),
      height: Number(bar.getAttribute('height')),
    }));
    expect(up!.y + up!.height).toBeCloseTo(down!.y, 6);
    expect(up!.height).toBeCloseTo(2 * down!.height, 6);
    expect(element.querySelector('svg')?.getAttribute('aria-label')).toBe('1: 1; 2: −0.5');
  });

  it('counts from no photon where the entries are probabilities', async () => {
    const element = await show({ entries: [0.5, 0.25], first: 0 });
    expect([...element.querySelectorAll('text')].map((each) => each.textContent.trim())).toEqual(['0', '1']);
    expect(element.querySelector('svg')?.getAttribute('aria-label')).toContain('0: 0.5');
  });

  it('has its place before anything is typed', async () => {
    const element = await show({ entries: [] });
    expect(element.querySelectorAll('rect')).toHaveLength(0);
    expect(element.querySelector('svg')?.getAttribute('aria-label')).toBe('No entry yet');
  });
});
