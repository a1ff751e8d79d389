import { TestKey } from '@angular/cdk/testing';
import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { Component, signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import type { FringeBar } from './fringe-bar';
import { FringeStrip } from './fringe-strip';
import { barHeight, layOutStrip, sortIntoGroups } from './strip-layout';
import { FringeStripHarness } from './testing/fringe-strip-harness';

const groups = [
  { key: 'right', name: 'right' },
  { key: 'x2', name: 'twice the key' },
  { key: 'none', name: 'no relation' },
];

const bar = (id: string, group: string, more: Partial<FringeBar> = {}): FringeBar => ({
  id,
  label: id.toUpperCase(),
  group,
  state: 'unmarked',
  height: null,
  ...more,
});

const some: readonly FringeBar[] = [
  bar('a1', 'right', { state: 'marked', height: 3 }),
  bar('a2', 'right'),
  bar('b1', 'x2', { state: 'marked', height: null }),
  bar('b2', 'x2', { held: { name: 'Iwo Brandt', initials: 'IB', hue: 1, mine: false } }),
  bar('b3', 'x2', { held: { name: 'Rui Castellan', initials: 'RC', hue: 2, mine: true } }),
  bar('c1', 'none', { state: 'set aside' }),
];

@Component({
  imports: [FringeStrip],
  template: `<app-fringe-strip
    [bars]="bars()"
    [groups]="groups"
    [fullMarks]="3"
    [expected]="6"
    [current]="current()"
    [chosenGroup]="chosen()"
    (barChosen)="taken.push($event)"
    (groupChosen)="chosen.set($event)"
  />`,
})
class Bench {
  readonly groups = groups;
  readonly bars = signal<readonly FringeBar[] | null>(some);
  readonly current = signal<string | null>(null);
  readonly chosen = signal<string | null>(null);
  readonly taken: string[] = [];
}

async function show(change?: (bench: Bench) => void) {
  const fixture = TestBed.createComponent(Bench);
  change?.(fixture.componentInstance);
  await fixture.whenStable();
  const harness = await TestbedHarnessEnvironment.loader(fixture).getHarness(FringeStripHarness);
  return { fixture, bench: fixture.componentInstance, harness };
}

describe('FringeStrip', () => {
  it('reads every bar out with its state', async () => {
    const { harness } = await show();
    expect(await harness.getBars()).toEqual([
      'A1, 1 of 2 in right, marked, 3 of 3',
      'A2, 2 of 2 in right, unmarked',
      'B1, 1 of 3 in twice the key, marked',
      'B2, 2 of 3 in twice the key, unmarked, held by Iwo Brandt',
      'B3, 3 of 3 in twice the key, unmarked, in your hand',
      'C1, 1 of 1 in no relation, set aside',
    ]);
    expect(await harness.getFlags()).toEqual(['IB', 'you']);
  });

  it('names the patterns with what is marked of all', async () => {
    const { harness } = await show();
    expect(await harness.getPatterns()).toEqual([
      'right1 of 2 marked',
      'twice the key1 of 3 marked',
      'no relation0 of 1 marked',
    ]);
  });

  it('is walked by arrows, Home and End, and holds at its ends', async () => {
    const { harness } = await show();
    expect(await harness.getVisited()).toContain('A1');
    await harness.press(TestKey.LEFT_ARROW);
    expect(await harness.getVisited()).toContain('A1');
    await harness.press(TestKey.RIGHT_ARROW, TestKey.RIGHT_ARROW);
    expect(await harness.getVisited()).toContain('B1');
    await harness.press(TestKey.END, TestKey.RIGHT_ARROW);
    expect(await harness.getVisited()).toContain('C1');
    await harness.press(TestKey.HOME);
    expect(await harness.getVisited()).toContain('A1');
  });

  it('walks patterns by brackets, stopping at what is unmarked', async () => {
    const { harness, bench } = await show();
    await harness.press(']');
    expect(await harness.getVisited()).toContain('B2');
    expect(bench.chosen()).toBe('x2');
    await harness.press('[');
    expect(await harness.getVisited()).toContain('A2');
    await harness.choosePattern('no relation');
    expect(bench.chosen()).toBe('none');
  });

  it('takes the visited bar by Enter', async () => {
    const { harness, bench } = await show();
    await harness.press(TestKey.RIGHT_ARROW, TestKey.ENTER);
    expect(bench.taken).toEqual(['a2']);
  });

  it('begins at the answer in hand and stays where it is while others mark', async () => {
    const { harness, bench, fixture } = await show((b) => b.current.set('b3'));
    expect(await harness.getVisited()).toContain('B3');
    bench.bars.set(some.map((each) => (each.id === 'a2' ? { ...each, state: 'marked', height: 1 } : each)));
    await fixture.whenStable();
    expect(await harness.getVisited()).toContain('B3');
    expect((await harness.getBars())[1]).toBe('A2, 2 of 2 in right, marked, 1 of 3');
  });

  it('says what to do where the pile is empty', async () => {
    const { fixture } = await show((b) => b.bars.set([]));
    expect((fixture.nativeElement as HTMLElement).textContent).toContain('Nothing to mark yet.');
  });

  it('stands hollow from the count while answers are on their way', async () => {
    const { fixture } = await show((b) => b.bars.set(null));
    expect((fixture.nativeElement as HTMLElement).querySelectorAll('rect')).toHaveLength(6);
  });
});

describe('layOutStrip', () => {
  const many = (group: string, count: number) => Array.from({ length: count }, (_, i) => bar(`${group}${i}`, group));

  it('keeps bars 12 px apart, and patterns further apart than that', () => {
    const layout = layOutStrip(sortIntoGroups([...many('right', 46), ...many('x2', 8)], groups), 1552, 'right');
    expect(layout.pitch).toBe(12);
    expect(layout.groups[0]?.bars.slice(0, 2).map((placed) => placed.x)).toEqual([4, 16]);
    expect(layout.groups[1]?.from).toBe(4 + 46 * 12 + 16 + 24);
  });

  it('draws the right ones as one block where bars would be too thin', () => {
    const layout = layOutStrip(sortIntoGroups([...many('right', 150), ...many('x2', 20)], groups), 800, 'right');
    expect(layout.groups.map((group) => group.tallied)).toEqual([true, false]);
    expect(layout.pitch).toBe(12);
  });

  it('stays within the width', () => {
    const bars = [...many('right', 300), ...many('x2', 200), ...many('none', 100)];
    for (const width of [320, 640, 1552]) {
      const layout = layOutStrip(sortIntoGroups(bars, groups), width, 'right');
      expect(layout.groups.at(-1)?.to).toBeLessThanOrEqual(width);
    }
  });

  it('puts what has no known pattern last', () => {
    const sorted = sortIntoGroups([bar('z', 'unheard'), bar('a', 'right')], groups);
    expect(sorted.map((group) => group.name)).toEqual(['right', 'unheard']);
  });
});

describe('barHeight', () => {
  it('is in proportion, with a stub for nothing', () => {
    expect(barHeight(3, 3)).toBe(88);
    expect(barHeight(1.5, 3)).toBe(44);
    expect(barHeight(0, 3)).toBe(3);
    expect(barHeight(null, 3)).toBe(88);
  });
});
