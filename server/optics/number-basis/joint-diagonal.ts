import { MethodDoesNotApply } from '../method-does-not-apply';
import { channelsOf, type Channel, type State } from '../state';
import { eachAmplitude } from './joint-ket';
import { channelOnDiagonal } from './channels-on-numbers';
import { ensembleOf, numberDiagonal } from './number-states';
import type { NumberDiagonal } from './one-mode';
import { pushedIn } from './operations-on-factors';
import { builtOnce, resolve, type Resolution } from './resolution';

/** P(n, m) of two modes, row by row of n. */
export interface JointDiagonal {
  readonly levels: number;
  readonly p: Float64Array;
  readonly noise: number;
  readonly outside: number;
}

/** Most levels of each mode in a table of joint probabilities: 32 MB. */
const MOST_JOINT_LEVELS = 2000;

/** Most multiplications of one channel. */
const MOST_WORK = 2e8;

/**
 * Joint photon probabilities; losses and amplifiers behind the last coherent operation need no coherences.
 *
 * @throws MethodDoesNotApply where the state would be too large
 */
export const jointDiagonal = builtOnce(build);

function checkLevels(levels: number): void {
  if (levels > MOST_JOINT_LEVELS) {
    throw new MethodDoesNotApply(
      `the joint probabilities would take ${levels} levels a mode, more than ${MOST_JOINT_LEVELS}`,
    );
  }
}

function build(given: State, resolution: Resolution): JointDiagonal {
  const state = pushedIn(given);
  switch (state.kind) {
    case 'product': {
      const first = numberDiagonal(state.first, resolution);
      const second = numberDiagonal(state.second, resolution);
      const levels = Math.max(first.levels, second.levels);
      checkLevels(levels);
      const p = new Float64Array(levels * levels);
      for (let n = 0; n < first.levels; n++) {
        for (let m = 0; m < second.levels; m++) p[n * levels + m] = first.p[n]! * second.p[m]!;
      }
      return { levels, p, noise: first.noise + second.noise, outside: first.outside + second.outside };
    }
    case 'phaseShift':
      return jointDiagonal(state.state, resolution);
    case 'lose':
    case 'amplify': {
      const { channels, inner } = channelsOf(state);
      return channels.reduce(
        (diagonal, channel) => throughChannel(diagonal, channel, () => resolve(state, resolution)),
        jointDiagonal(inner, resolution),
      );
    }
    case 'mixture': {
      const parts = state.states
        .map((part, index) => ({ part, probability: state.probabilities[index] ?? 0 }))
        .filter(({ probability }) => probability > 0)
        .map(({ part, probability }) => ({ inner: jointDiagonal(part, resolution), probability }));
      const levels = Math.max(...parts.map(({ inner }) => inner.levels));
      const p = new Float64Array(levels * levels);
      let outside = 0;
      let noise = 0;
      for (const { inner, probability } of parts) {
        for (let n = 0; n < inner.levels; n++) {
          for (let m = 0; m < inner.levels; m++) p[n * levels + m]! += probability * inner.p[n * inner.levels + m]!;
        }
        outside += probability * inner.outside;
        noise += probability * inner.noise;
      }
      return { levels, p, noise, outside };
    }
    default: {
      const { kets, levels, noise, outside } = ensembleOf(state, resolution);
      checkLevels(levels);
      const p = new Float64Array(levels * levels);
      for (const ket of kets) {
        eachAmplitude(ket, (n, m, re, im) => {
          p[n * levels + m]! += re * re + im * im;
        });
      }
      return { levels, p, noise: noise * 2, outside };
    }
  }
}

/** A channel on one of the modes, line by line of the other's number. */
function throughChannel(
  inner: JointDiagonal,
  channel: Channel,
  amplified: () => { readonly levels: number; readonly outside: number },
): JointDiagonal {
  const size = channel.noise === 0 ? { levels: inner.levels, outside: 0 } : amplified();
  const levels = Math.max(size.levels, inner.levels);
  checkLevels(levels);
  if (inner.levels ** 2 * levels > MOST_WORK)
    throw new MethodDoesNotApply('the joint probabilities would take too long');
  const p = new Float64Array(levels * levels);
  for (let other = 0; other < inner.levels; other++) {
    const line: NumberDiagonal = {
      kind: 'diagonal',
      levels: inner.levels,
      p: Float64Array.from({ length: inner.levels }, (_, n) =>
        channel.mode === 1 ? inner.p[n * inner.levels + other]! : inner.p[other * inner.levels + n]!,
      ),
      noise: inner.noise,
      outside: 0,
    };
    if (line.p.every((value) => value === 0)) continue;
    const mapped = channelOnDiagonal(line, channel, () => ({ levels, outside: 0 }));
    for (let n = 0; n < mapped.levels; n++) {
      if (channel.mode === 1) p[n * levels + other] = mapped.p[n]!;
      else p[other * levels + n] = mapped.p[n]!;
    }
  }
  return { levels, p, noise: inner.noise, outside: inner.outside + size.outside };
}
