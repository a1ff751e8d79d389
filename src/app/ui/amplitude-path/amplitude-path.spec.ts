import { TestBed } from '@angular/core/testing';
import { AmplitudePath } from './amplitude-path';

const steps = [
  { x: 2, p: 0, spread: 0.7 },
  { x: 1.5, p: 0.5, spread: 0.9 },
  { x: 1, p: 1, spread: 1.4 },
];

async function show() {
  const fixture = TestBed.createComponent(AmplitudePath);
  fixture.componentRef.setInput('steps', steps);
  await fixture.whenStable();
  return fixture.nativeElement as HTMLElement;
}

describe('AmplitudePath', () => {
  it('says where the amplitude comes from and where it goes', async () => {
    expect((await show()).querySelector('svg')?.getAttribute('aria-label')).toBe(
      'Mean amplitude in phase space, from (2, 0) with a spread of 0.7 to (1, 1) with a spread of 1.4.',
    );
  });

  it('draws circles to scale and keeps all of them inside', async () => {
    const circles = [...(await show()).querySelectorAll('circle:not(.dot)')].map((circle) => ({
      x: Number(circle.getAttribute('cx')) - 38,
      y: Number(circle.getAttribute('cy')),
      r: Number(circle.getAttribute('r')),
    }));
    const [first, last] = [circles[0]!, circles.at(-1)!];
    expect(last.r / first.r).toBeCloseTo(2, 6);
    for (const { x, y, r } of circles) {
      expect(Math.min(x - r, y - r)).toBeGreaterThanOrEqual(0);
      expect(Math.max(x + r, y + r)).toBeLessThanOrEqual(176);
    }
  });
});
