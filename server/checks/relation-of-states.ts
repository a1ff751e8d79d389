import { modulus, type Complex } from '@shared/reading/complex';
import type { ReadingOf } from '@shared/reading/reading';
import { fidelityWithKey } from './compare-state';
import type { StateAmplitude } from '../keys/state-components';
import { asState, type ComputedKey, type StateKey } from './key-value';
import type { RelationMatch } from './relation';

type PureKey = Extract<StateKey, { readonly amplitudes: readonly StateAmplitude[] }>;

const mapped = (key: PureKey, change: (entry: StateAmplitude) => Complex): PureKey => ({
  modes: key.modes,
  amplitudes: key.amplitudes.map((entry) => ({ photons: entry.photons, ...change(entry) })),
});

/** What the state would be after mistakes that states suffer. */
const mistakes: readonly { readonly name: string; readonly of: (key: PureKey) => PureKey }[] = [
  { name: 'the key with its amplitudes conjugated', of: (key) => mapped(key, ({ re, im }) => ({ re, im: -im })) },
  {
    name: 'the key with its modes exchanged',
    of: (key) => ({
      modes: key.modes,
      amplitudes: key.amplitudes.map((entry) => ({ ...entry, photons: [...entry.photons].reverse() })),
    }),
  },
  { name: 'the key without its phases', of: (key) => mapped(key, (entry) => ({ re: modulus(entry), im: 0 })) },
  {
    name: 'the key with the sign of every second component changed',
    of: (key) =>
      mapped(key, ({ photons, re, im }) =>
        (photons[photons.length - 1] ?? 0) % 2 === 1 ? { re: -re, im: -im } : { re, im },
      ),
  },
  {
    name: 'probabilities of the key in place of amplitudes',
    of: (key) => mapped(key, (entry) => ({ re: modulus(entry) ** 2, im: 0 })),
  },
];

const named = (name: string): RelationMatch => ({ relation: { name }, deviation: 0 });

/** Relations of a state to a pure key, by fidelity with what a mistake would have made of the key. */
export function relationsBetweenStates(
  reading: ReadingOf<'state'>,
  key: ComputedKey,
  minimumFidelity: number,
): readonly RelationMatch[] {
  const state = asState(key.value);
  if (!('amplitudes' in state) || state.modes !== reading.modes) {
    return state.modes === reading.modes ? [] : [named('a state of another number of modes')];
  }
  const found = mistakes
    .filter(({ of }) => fidelityWithKey(reading, of(state)) >= minimumFidelity)
    .map(({ name }) => named(name));
  if (found.length > 0) return found;
  const populated = new Set(
    state.amplitudes.filter((entry) => modulus(entry) > 1e-6).map(({ photons }) => photons.join()),
  );
  const written = reading.kets
    .filter(({ amplitude }) => modulus(amplitude) > 1e-6)
    .map(({ photons }) => photons.join());
  const sameKets = written.length === populated.size && written.every((photons) => populated.has(photons));
  return sameKets && written.length > 1 ? [named('the kets of the key with other amplitudes')] : [];
}
