import type { SampledKey } from '@shared/problem-routes';
import { PartBench } from './part-bench';
import { noNames, showPart } from './testing/show-part';

const variant = (key: SampledKey) => [{ number: 1, givens: {}, parts: [{ key, slips: [] }] }];

async function choose(root: HTMLElement, form: string) {
  const select = root.querySelector<HTMLSelectElement>('.form select')!;
  select.value = form;
  select.dispatchEvent(new Event('change'));
}

describe('PartBench', () => {
  beforeEach(() => localStorage.clear());

  it('shows the fields of the form, and what was typed again when the form is again what it was', async () => {
    const { root, sync, answer } = await showPart(PartBench, { key: 'nbar', unit: 'MHz' }, { names: noNames });
    expect(root.textContent).toContain('unit of the answer');
    await choose(root, 'state');
    await sync();
    expect(root.textContent).toContain('minimum fidelity');
    expect(root.textContent).not.toContain('unit of the answer');
    await choose(root, 'choice');
    await sync();
    expect(root.querySelector('app-choice-options')).not.toBeNull();
    expect(root.querySelector('app-expression-editor')).toBeNull();
    await choose(root, 'number');
    await sync();
    expect(answer()).toMatchObject({ form: 'number', key: 'nbar', unit: 'MHz' });
  });

  it('shows a list as a small grid, and how far two methods agree', async () => {
    const key = { value: [0.25, 0.75], method: 'phase space', agreesTo: 15 };
    const { root, sync } = await showPart(
      PartBench,
      { form: 'list', key: '[1/4, 3/4]' },
      { names: noNames, variants: variant(key) },
    );
    // Samples wait until the typing rests.
    await new Promise((resolve) => setTimeout(resolve, 350));
    await sync();
    expect([...root.querySelectorAll('.cell')].map((cell) => cell.textContent)).toEqual(['0.25000', '0.75000']);
    expect(root.textContent).toContain('15 digits agree');
  });
});
