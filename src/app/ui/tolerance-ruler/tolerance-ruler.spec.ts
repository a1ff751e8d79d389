import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { placeLabels, stackDots } from './ruler-labels';
import { chooseScale, linearScale, ratioScale } from './ruler-scale';
import { ToleranceRulerHarness } from './testing/tolerance-ruler-harness';
import { ToleranceRuler } from './tolerance-ruler';

async function show(inputs: Readonly<Record<string, unknown>>) {
  const fixture = TestBed.createComponent(ToleranceRuler);
  for (const [name, value] of Object.entries(inputs)) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  return TestbedHarnessEnvironment.harnessForFixture(fixture, ToleranceRulerHarness);
}

const slips = [
  { name: 'T for R', value: 0.0608 },
  { name: 'amplitude, not probability', value: 0.5488 },
];

describe('ToleranceRuler', () => {
  it('says key, band and slips', async () => {
    const ruler = await show({ value: 0.3012, band: { low: 0.2952, high: 0.3072 }, slips });
    expect(await ruler.getSentence()).toBe(
      'Key 0.3012; right from 0.2952 to 0.3072; slip “T for R” at 0.0608; slip “amplitude, not probability” at 0.5488',
    );
    expect(await ruler.getSlipNames()).toEqual(['T for R', 'amplitude, not probability']);
  });

  it('leaves the tick out that would meet the key', async () => {
    const ruler = await show({ value: 0.3012, slips });
    expect(await ruler.getTicks()).toEqual(['0.0', '0.1', '0.2', '0.4', '0.5']);
  });

  it('shows answers in proportion to the key', async () => {
    const answers = [0.5, 1, 2, 2, 16].map((value) => ({ value }));
    const ruler = await show({ value: 0.203, ratio: true, answers, answer: 0.406, slips: [] });
    expect(await ruler.countDots()).toBe(5);
    expect(await ruler.getTicks()).toContain('½');
    expect(await ruler.getSentence()).toContain('this answer 0.406; 5 answers of the class');
  });

  it('stands on a plain axis where the key is zero', async () => {
    const ruler = await show({ value: 0, ratio: true, band: { low: -0.01, high: 0.01 } });
    expect((await ruler.getTicks()).length).toBeGreaterThan(0);
  });
});

describe('chooseScale', () => {
  it('is logarithmic past a factor 30 only', () => {
    expect(chooseScale([1, 29], 0, 100).kind).toBe('linear');
    expect(chooseScale([1, 31], 0, 100).kind).toBe('logarithmic');
    expect(chooseScale([-1, 31], 0, 100).kind).toBe('linear');
    expect(chooseScale([-1, -31], 0, 100).kind).toBe('logarithmic');
  });

  it('keeps order and stays within its ends', () => {
    for (const values of [[0.2], [0.001, 5], [-3, 2], [-0.001, -4], [1e7, 1.1e7], [0, 0]]) {
      const { place, ticks } = chooseScale(values, 10, 90);
      const sorted = [...values].sort((a, b) => a - b).map(place);
      expect(sorted).toEqual([...sorted].sort((a, b) => a - b));
      for (const x of [...sorted, ...ticks.map((tick) => tick.at)]) {
        expect(x).toBeGreaterThanOrEqual(9.99);
        expect(x).toBeLessThanOrEqual(90.01);
      }
    }
  });

  it('writes decades out where they are short, and as powers where they are not', () => {
    const texts = chooseScale([2e-4, 5], 0, 100).ticks.map((tick) => tick.text);
    expect(texts).toEqual(['10⁻⁴', '10⁻³', '0.01', '0.1', '1', '10']);
  });

  it('begins a linear axis at zero where zero is near', () => {
    expect(linearScale([0.06, 0.55], 0, 100).ticks[0]).toEqual({ at: 0, text: '0.0' });
  });
});

describe('ratioScale', () => {
  it('holds the wrong sign and the far away at its ends', () => {
    const { place } = ratioScale([1, 1000, -2], 0, 100);
    expect(place(-2)).toBe(0);
    expect(place(1000)).toBe(100);
  });
});

describe('placeLabels', () => {
  it('raises a name that would meet another, and drops one without room', () => {
    const labels = Array.from({ length: 4 }, () => ({ x: 100, text: 'vacuum left out', bold: false }));
    expect(placeLabels(labels, 400, 3).map((label) => label.row)).toEqual([0, 1, 2, undefined]);
  });
});

describe('stackDots', () => {
  it('lets a dot stand for several answers rather than grow without end, and drops none', () => {
    const answers = [...Array.from({ length: 100 }, () => ({ x: 8, chosen: false })), { x: 80, chosen: true }];
    const { dots, each } = stackDots(answers, 4, 0, 4, 8);
    expect(each).toBe(13);
    expect(dots.filter((dot) => dot.x === 8)).toHaveLength(8);
    expect(dots.filter((dot) => dot.chosen)).toHaveLength(1);
  });
});
