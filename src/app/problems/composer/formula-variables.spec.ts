import { emptyVariable } from '@shared/problem-draft';
import { FormulaVariables } from './formula-variables';
import { showPart } from './testing/show-part';

describe('FormulaVariables', () => {
  beforeEach(() => localStorage.clear());

  it('keeps name, range and spellings as they are typed', async () => {
    const { root, sync, answer } = await showPart(FormulaVariables, { form: 'formula', variables: [emptyVariable()] });
    const type = async (label: string, text: string) => {
      const box = root.querySelector<HTMLInputElement>(`[aria-label="${label}"]`);
      box!.value = text;
      box!.dispatchEvent(new Event('input'));
      await sync();
    };
    await type('Name of variable 1', 'kappa');
    await type('Lowest value of kappa', '0,5');
    await type('Highest value of kappa', '0.2');
    await type('Spellings of kappa', 'k, κ');
    expect(answer()?.variables[0]).toMatchObject({ name: 'kappa', low: '0,5', high: '0.2', spellings: 'k, κ' });
    expect(root.textContent).toContain('must lie below its high end');
    expect(root.querySelector('.katex')).not.toBeNull();
  });

  it('takes whole numbers where they are asked for', async () => {
    const { root, sync, answer } = await showPart(FormulaVariables, {
      form: 'formula',
      variables: [{ ...emptyVariable(), name: 'n', low: '0', high: '5' }],
    });
    const kind = root.querySelector('select')!;
    kind.value = 'whole';
    kind.dispatchEvent(new Event('change'));
    await sync();
    expect(answer()?.variables[0]?.integers).toBe(true);
  });
});
