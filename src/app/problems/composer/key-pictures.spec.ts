import { of } from 'rxjs';
import type { StatePicture } from '@shared/key-picture';
import type { KeyFunction } from '@shared/key-language';
import { KeyPictures } from './key-pictures';
import { noNames, showPart } from './testing/show-part';

const coherent: KeyFunction = {
  name: 'coherent',
  signature: 'coherent(alpha)',
  summary: 'The coherent state.',
  formula: '',
  group: 'States of one mode',
  makes: 'state',
  arguments: [],
  example: null,
};
const picture: StatePicture = {
  modes: 2,
  mode: 1,
  mean: 1,
  bars: { first: 0, step: 1, probabilities: [0.3679, 0.3679, 0.1839] },
  wigner: { points: 2, x: [-3, 3], p: [-3, 3], scale: 0.3, values: [0, 0, 0, 1000], least: 0, most: 0.3 },
  path: {
    passages: ['damp'],
    points: [
      { x: 2, p: 0, spread: 0.7 },
      { x: 1, p: 0, spread: 0.7 },
    ],
  },
  asked: 1,
};

async function show(key: string) {
  const asked: unknown[] = [];
  const api = {
    keyPicture: (body: unknown) => {
      asked.push(body);
      return of({ picture, why: '' });
    },
  };
  const shown = await showPart(
    KeyPictures,
    { key },
    {
      names: { ...noNames, functions: [coherent] },
      api,
      variants: [{ number: 7, givens: {}, parts: [{ key: null, slips: [] }] }],
    },
  );
  // Samples and pictures wait until the typing rests.
  const settle = async () => {
    await new Promise((resolve) => setTimeout(resolve, 750));
    await shown.sync();
  };
  await settle();
  return { ...shown, settle, asked };
}

describe('KeyPictures', () => {
  beforeEach(() => localStorage.clear());

  it('draws P(n), the Wigner function and the path of the state in the key', async () => {
    const { root, asked } = await show('g2(coherent(1))');
    expect(asked).toHaveLength(1);
    expect(asked[0]).toMatchObject({ expression: 'g2(coherent(1))', mode: 1 });
    expect([...root.querySelectorAll('figcaption')].map((each) => each.textContent)).toEqual([
      'P(n) of mode 1',
      'W(x, p) of mode 1',
      '⟨a⟩, damped',
    ]);
    expect(root.textContent).toContain('variant 7, mean 1');
    expect(root.textContent).toContain('Bar n = 1 is asked for.');
  });

  it('shows the other mode of a joint state', async () => {
    const { root, settle, asked } = await show('visibility(product(coherent(1), coherent(2)))');
    root.querySelectorAll<HTMLButtonElement>('.modes button')[1]?.click();
    await settle();
    expect(asked.at(-1)).toMatchObject({ mode: 2 });
  });

  it('takes no room where the key is of no state', async () => {
    const { root, asked } = await show('nbar*(1 - T)');
    expect(asked).toEqual([]);
    expect(root.querySelector('section')).toBeNull();
  });
});
