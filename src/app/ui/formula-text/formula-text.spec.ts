import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { Component, signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import { FormulaText } from './formula-text';
import type { PrintedGivens } from './printed-given';
import { FormulaTextHarness } from './testing/formula-text-harness';
import type { FormulaProblem } from './typeset';
import { typeset } from './typeset';

@Component({
  imports: [FormulaText],
  template: `<app-formula-text
    [text]="text()"
    [givens]="givens()"
    [showGivens]="showGivens()"
    [figures]="figures()"
    [inline]="inline()"
    (formulaProblems)="problems = $event"
  />`,
})
class Page {
  readonly text = signal('');
  readonly givens = signal<PrintedGivens>({});
  readonly showGivens = signal(false);
  readonly figures = signal<Readonly<Record<string, string>>>({});
  readonly inline = signal(false);
  problems: readonly FormulaProblem[] = [];
}

async function show(text: string, change?: (page: Page) => void) {
  const fixture = TestBed.createComponent(Page);
  fixture.componentInstance.text.set(text);
  change?.(fixture.componentInstance);
  await fixture.whenStable();
  const harness = await TestbedHarnessEnvironment.loader(fixture).getHarness(FormulaTextHarness);
  return { fixture, page: fixture.componentInstance, harness, element: fixture.nativeElement as HTMLElement };
}

describe('FormulaText', () => {
  it('sets formulas within words', async () => {
    const { harness } = await show('Mean $\\bar n = 4$ and **bold**.');
    expect(await harness.getFormulas()).toEqual(['\\bar n = 4']);
    expect(await harness.getText()).toContain('bold');
  });

  it('prints givens in formulas and in words, and underlines them for authors', async () => {
    const text = 'Power $P = \\val{P}$ for \\val{t}.';
    const { harness, page, fixture } = await show(text, (p) =>
      p.givens.set({ P: { printed: '2.40', unit: 'pW' }, t: { printed: '1.00', unit: 'µs' } }),
    );
    expect(await harness.getFormulas()).toEqual(['P = {2.40\\,\\text{pW}}']);
    expect(await harness.getText()).toContain('1.00\u00a0µs');
    expect(await harness.countShownGivens()).toBe(0);
    page.showGivens.set(true);
    await fixture.whenStable();
    expect(await harness.countShownGivens()).toBe(2);
  });

  it('begins a paragraph at each part', async () => {
    const { harness } = await show('Stem.\n(a) One\n(b) Two\n    goes on');
    expect(await harness.getParagraphs()).toEqual(['Stem.', '(a) One', '(b) Two\ngoes on']);
  });

  it('shows HTML as characters', async () => {
    const { element, harness } = await show('a <img src=x onerror=alert(1)> <b>b</b>\n\n<script>alert(1)</script>');
    expect(element.querySelector('img, b, script')).toBeNull();
    expect(await harness.getText()).toContain('<b>b</b>');
  });

  it('leads to the web and to mail only', async () => {
    const { harness } = await show(
      '[a](https://a.example) [b](mailto:b@b.example) [c](javascript:alert(1)) [d](data:text/html,x) [e](/inside)',
    );
    expect(await harness.getLinkAddresses()).toEqual(['https://a.example', 'mailto:b@b.example']);
  });

  it('shows pictures that were handed over, no others', async () => {
    const { harness } = await show('![set-up](bench.png) ![spy](https://spy.example/x.png) ![p](__proto__)', (p) =>
      p.figures.set({ 'bench.png': '/api/figures/1' }),
    );
    expect(await harness.getPictureAddresses()).toEqual(['/api/figures/1']);
    expect(await harness.getText()).toContain('spy');
  });

  it('refuses links, classes and endless expansion inside formulas', async () => {
    const { element, page } = await show(
      '$\\href{javascript:alert(1)}{x}$ $\\htmlClass{evil}{x}$ $\\def\\a{\\a\\a}\\a$ $\\rule{9999em}{9999em}$',
    );
    expect(element.querySelector('a, .evil')).toBeNull();
    expect(page.problems.map((problem) => problem.message).join()).toContain('Too many expansions');
  });

  it('tells which formula cannot be read', async () => {
    const { page, harness } = await show('Good $x$, bad $\\frac{1}{$.');
    expect(page.problems).toHaveLength(1);
    expect(page.problems[0]?.formula).toBe('\\frac{1}{');
    expect(await harness.getText()).toContain('Good');
  });

  it('leaves prices, escaped dollars and code alone', async () => {
    const { harness } = await show('It costs $5 or \\$6, `$x$` and 7$.');
    expect(await harness.getFormulas()).toEqual([]);
    expect(await harness.getText()).toContain('$x$');
  });

  it('keeps signs of emphasis inside formulas', async () => {
    const { harness } = await show('*one $a*b$ two* and $x_1$ _so_ $x_2$');
    expect(await harness.getFormulas()).toEqual(['a*b', 'x_1', 'x_2']);
  });

  it('sets a few words without a paragraph', async () => {
    const { harness, element } = await show('Variance of $x$', (p) => p.inline.set(true));
    expect(await harness.getParagraphs()).toEqual([]);
    expect(element.querySelector('app-formula-text')?.textContent).toContain('Variance of');
  });

  it('displays formulas on their own lines', async () => {
    const { element, harness } = await show('Then\n\n$$\nW(0,0) = \\frac{2}{\\pi}\n$$\n\nfollows.');
    expect(await harness.getFormulas()).toEqual(['\nW(0,0) = \\frac{2}{\\pi}\n'.trim()]);
    expect(element.querySelector('.katex-display')).not.toBeNull();
  });
});

describe('typeset', () => {
  const setting = { givens: {}, showGivens: false, figures: {}, inline: false };

  it('keeps the nodes of blocks that did not change', () => {
    const before = typeset('One $a$.\n\nTwo $b$.', setting, []);
    const after = typeset('One $a$.\n\nTwo $b$, changed.', setting, before);
    expect(after[0]).toBe(before[0]);
    expect(after[1]).not.toBe(before[1]);
  });

  it('sets a long statement again within 100 ms', () => {
    const lines = Array.from({ length: 200 }, (_, i) =>
      i % 10 === 9 ? '' : i % 2 ? `Line ${i} with $\\frac{a_{${i}}}{\\sqrt{1-\\eta}}$ in it.` : `Line ${i} of words.`,
    );
    const text = (word: string) => [...lines, word].join('\n');
    let set = typeset(text('start'), setting, []);
    const began = performance.now();
    set = typeset(text('startled'), setting, set);
    expect(performance.now() - began).toBeLessThan(100);
    expect(set).toHaveLength(21);
  });
});
