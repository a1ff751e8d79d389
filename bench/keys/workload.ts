import { seededSource, type RandomSource } from '../../server/keys/fuzz/seeded-source';

/** A kind of key: one expression, asked for many variants. */
export interface KeyKind {
  readonly name: string;
  readonly expression: string;
  readonly draw: (source: Draw) => Readonly<Record<string, number>>;
}

interface Draw {
  readonly real: (low: number, high: number) => number;
  readonly whole: (low: number, high: number) => number;
}

const drawFrom = (source: RandomSource): Draw => ({
  // Four digits, as a problem prints its givens.
  real: (low, high) => Number((low + ((high - low) * source.below(1_000_001)) / 1_000_000).toPrecision(4)),
  whole: (low, high) => low + source.below(high - low + 1),
});

/** The twelve kinds of the workload. */
export const kinds: readonly KeyKind[] = [
  {
    name: 'coherent light',
    expression: 'photonProbability(coherent(alpha), n)',
    draw: ({ real, whole }) => ({ alpha: real(0.5, 5), n: whole(0, 30) }),
  },
  {
    name: 'displaced squeezed light',
    expression: 'photonProbability(displaced(squeezed(r, phi), alpha), n)',
    draw: ({ real, whole }) => ({ r: real(0.1, 1.2), phi: real(0, 6), alpha: real(0.2, 3), n: whole(0, 25) }),
  },
  {
    name: 'amplified light',
    expression: 'photonProbability(amplify(coherent(alpha), G), n)',
    draw: ({ real, whole }) => ({ alpha: real(0.3, 2), G: real(1.1, 3), n: whole(0, 20) }),
  },
  {
    name: 'numbers behind a splitter',
    expression: 'jointProbability(beamSplitter(ket(n, m), T), k, n + m - k)',
    draw: ({ real, whole }) => {
      const [n, m] = [whole(0, 6), whole(0, 6)];
      return { n, m, T: real(0.1, 0.9), k: whole(0, n + m) };
    },
  },
  {
    name: 'coincidences behind a splitter',
    expression: 'coincidence(beamSplitter(product(coherent(alpha), fock(n)), T))',
    draw: ({ real, whole }) => ({ alpha: real(0.3, 1.5), n: whole(0, 4), T: real(0.1, 0.9) }),
  },
  {
    name: 'Wigner function of a cat after loss',
    expression: 'wigner(lose(cat(alpha), eta), x, p)',
    draw: ({ real }) => ({ alpha: real(0.5, 2.5), eta: real(0.3, 1), x: real(-2, 2), p: real(-2, 2) }),
  },
  {
    name: 'parity of a cat after loss',
    expression: 'parity(lose(cat(alpha, theta), eta))',
    draw: ({ real }) => ({ alpha: real(0.5, 2.5), theta: real(0, 3), eta: real(0.3, 1) }),
  },
  {
    name: 'heralded photons',
    expression: 'photonProbability(heralded(lose(twinBeam(r), 1, eta), 1, 1), n)',
    draw: ({ real, whole }) => ({ r: real(0.1, 0.8), eta: real(0.2, 0.9), n: whole(0, 4) }),
  },
  {
    name: 'coherence of a heralded state',
    expression: 'g2(heralded(beamSplitter(product(squeezed(r), vacuum()), T), 2, 1))',
    draw: ({ real }) => ({ r: real(0.2, 0.8), T: real(0.5, 0.95) }),
  },
  {
    name: 'damped Fock states',
    expression: 'photonProbability(damp(fock(n), kappa, t, nbar), m)',
    draw: ({ real, whole }) => ({
      n: whole(1, 8),
      kappa: real(0.1, 2),
      t: real(0.1, 2),
      nbar: real(0.1, 1),
      m: whole(0, 6),
    }),
  },
  {
    name: 'collapse and revival',
    expression: 'atomInversion(coherent(alpha), g, t)',
    draw: ({ real }) => ({ alpha: real(1, 5), g: real(0.5, 2), t: real(0.1, 20) }),
  },
  {
    name: 'amplified Fock states',
    expression: 'mandelQ(amplify(fock(n), G))',
    draw: ({ real, whole }) => ({ n: whole(0, 6), G: real(1.1, 3) }),
  },
];

/** A key of the workload. */
export interface WorkloadKey {
  readonly expression: string;
  readonly givens: Readonly<Record<string, number>>;
}

/** `variants` keys of each kind, kind by kind; the same for the same seed. */
export function workload(variants: number, seed = 2026): readonly (readonly WorkloadKey[])[] {
  return kinds.map(({ expression, draw }, index) => {
    const source = drawFrom(seededSource(seed + index));
    return Array.from({ length: variants }, () => ({ expression, givens: draw(source) }));
  });
}
