import { ChoiceOptions } from './choice-options';
import { showPart } from './testing/show-part';

const options = [
  { label: 'A', text: 'coherent', correct: true },
  { label: 'B', text: 'thermal', correct: false },
];

describe('ChoiceOptions', () => {
  beforeEach(() => localStorage.clear());

  it('lets one correct option drive out the other, unless several can be', async () => {
    const { root, sync, answer } = await showPart(ChoiceOptions, { form: 'choice', options });
    const choose = async (index: number) => {
      root.querySelectorAll<HTMLInputElement>('.correct input')[index]?.click();
      await sync();
    };
    await choose(1);
    expect(answer()?.options.map(({ correct }) => correct)).toEqual([false, true]);
    root.querySelector<HTMLInputElement>('.several input')?.click();
    await sync();
    await choose(0);
    expect(answer()?.options.map(({ correct }) => correct)).toEqual([true, true]);
  });

  it('adds an option under the next letter', async () => {
    const { root, sync, answer } = await showPart(ChoiceOptions, { form: 'choice', options });
    [...root.querySelectorAll('button')].find((button) => button.textContent.includes('Option'))?.click();
    await sync();
    expect(answer()?.options.at(-1)).toEqual({ label: 'C', text: '', correct: false });
  });

  it('says at its field what is wrong with a label, and beneath that none is correct', async () => {
    const { root } = await showPart(ChoiceOptions, {
      form: 'choice',
      options: [
        { label: 'A', text: 'one', correct: false },
        { label: 'B C', text: 'other', correct: false },
      ],
    });
    const box = root.querySelector('[aria-label="Label of option 2"]');
    expect(box?.getAttribute('aria-invalid')).toBe('true');
    expect(root.textContent).toContain('has no spaces');
    expect(root.textContent).toContain('Name the correct option.');
  });
});
