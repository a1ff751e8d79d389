import { TestBed } from '@angular/core/testing';
import { WignerMap, type WignerGrid } from './wigner-map';

const grid: WignerGrid = {
  points: 3,
  x: [-3, 3],
  p: [-3, 3],
  scale: 0.17,
  values: [0, 100, 0, 500, -1000, 500, 0, 100, 0],
  least: -0.17,
  most: 0.085,
};

async function show(inputs: Readonly<Record<string, unknown>> = {}) {
  const fixture = TestBed.createComponent(WignerMap);
  for (const [name, value] of Object.entries({ grid, ...inputs })) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  return fixture.nativeElement as HTMLElement;
}

describe('WignerMap', () => {
  it('says in words what the map shows', async () => {
    const element = await show({ label: 'at output 1' });
    expect(element.querySelector('[role=img]')?.getAttribute('aria-label')).toBe(
      'Wigner function at output 1: x from −3 to 3, p from −3 to 3; at most 0.085, negative down to −0.17.',
    );
  });

  it('labels its axes on one scale, and ends its colours at the same size on both sides', async () => {
    const element = await show();
    const texts = [...element.querySelectorAll('text')].map((each) => each.textContent);
    expect(texts).toContain('x');
    expect(texts).toContain('p');
    expect(texts.filter((each) => each === '−2')).toHaveLength(2);
    expect(element.querySelector('.scale')?.textContent).toMatch(/−0\.17\s*0\s*0\.17/);
  });

  it('leaves labels out where there is no room', async () => {
    expect((await show({ size: 96 })).querySelectorAll('text')).toHaveLength(0);
  });
});
