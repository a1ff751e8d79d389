import { phase, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { applyUnitary, type NumberUnitary } from './displaced-numbers';
import { gainAmplitudes, lossAmplitudes } from './number-maps';
import { splitterColumn } from './splitter-blocks';

/** Amplitudes of N photons in two modes: entry n is ⟨n, N − n|ψ⟩. */
export interface Block {
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/** A ket of two modes by blocks of constant total number; empty blocks are left out. Its norm is its weight. */
export interface JointKet {
  readonly blocks: readonly (Block | undefined)[];
}

/** Amplitudes that all kets of one joint state may hold together: 128 MB. */
export const MOST_AMPLITUDES = 8_000_000;
/** Most multiplications of one operation on a joint state. */
const MOST_WORK = 6e8;

const newBlock = (total: number): Block => ({ re: new Float64Array(total + 1), im: new Float64Array(total + 1) });

/** Blocks out of one array of so many amplitudes: many small arrays take longer to make and to collect. */
function roomFor(amplitudes: number): (total: number) => Block {
  const store = new Float64Array(2 * amplitudes);
  let taken = 0;
  return (total) => {
    const re = store.subarray(taken, taken + total + 1);
    taken += 2 * (total + 1);
    return { re, im: store.subarray(taken - total - 1, taken) };
  };
}

const isEmpty = (block: Block): boolean => block.re.every((x) => x === 0) && block.im.every((x) => x === 0);

/** Amplitudes held by some kets. */
export const sizeOfKets = (kets: readonly JointKet[]): number =>
  kets.reduce((sum, ket) => sum + ket.blocks.reduce((inner, block) => inner + (block?.re.length ?? 0), 0), 0);

/** Refuses what would take too much memory or time, before it is begun. */
export function checkJointSize(amplitudes: number, work = 0): void {
  if (amplitudes > MOST_AMPLITUDES) {
    throw new MethodDoesNotApply(
      `the joint state would take ${Math.round(amplitudes)} amplitudes, more than ${MOST_AMPLITUDES}`,
    );
  }
  if (work > MOST_WORK) throw new MethodDoesNotApply('the joint state would take too long in blocks');
}

/** Applies a change to every amplitude's place: blocks are made where something lands. */
class KetBuilder {
  private readonly blocks: (Block | undefined)[] = [];

  constructor(private readonly levels: number) {}

  add(n1: number, n2: number, re: number, im: number): void {
    const total = n1 + n2;
    if (total >= this.levels || (re === 0 && im === 0)) return;
    const block = (this.blocks[total] ??= newBlock(total));
    block.re[n1]! += re;
    block.im[n1]! += im;
  }

  get isEmpty(): boolean {
    return this.blocks.length === 0;
  }

  get ket(): JointKet {
    return { blocks: Array.from({ length: this.levels }, (_, total) => this.blocks[total]) };
  }
}

/** |ψ⟩|φ⟩ up to a total number. */
export function productKet(
  first: { readonly re: Float64Array; readonly im: Float64Array },
  second: { readonly re: Float64Array; readonly im: Float64Array },
  levels: number,
): JointKet {
  const builder = new KetBuilder(levels);
  for (let n = 0; n < first.re.length && n < levels; n++) {
    const a = first.re[n]!;
    const b = first.im[n]!;
    if (a === 0 && b === 0) continue;
    const most = Math.min(second.re.length, levels - n);
    for (let m = 0; m < most; m++) {
      const c = second.re[m]!;
      const d = second.im[m]!;
      builder.add(n, m, a * c - b * d, a * d + b * c);
    }
  }
  return builder.ket;
}

/** Σ dⁿ c |n, n⟩ of a twin beam. */
export function twinKet(r: number, direction: Complex, levels: number): JointKet {
  const builder = new KetBuilder(levels);
  const angle = Math.atan2(direction.im, direction.re);
  const ratio = Math.tanh(r);
  let size = 1 / Math.cosh(r);
  for (let n = 0; 2 * n < levels; n++) {
    const turn = phase(angle * n);
    builder.add(n, n, size * turn.re, size * turn.im);
    size *= ratio;
  }
  return builder.ket;
}

/** b₁ = √T a₁ + e^{iφ}√R a₂, b₂ = −e^{−iφ}√R a₁ + √T a₂ on all kets, block by block. */
export function splitKets(kets: readonly JointKet[], transmittance: number, direction: Complex): readonly JointKet[] {
  const levels = Math.max(0, ...kets.map((ket) => ket.blocks.length));
  let work = 0;
  for (const ket of kets) {
    ket.blocks.forEach((block, total) => {
      if (block !== undefined) work += 6 * (total + 1) * countFilled(block);
    });
  }
  checkJointSize(sizeOfKets(kets), work);
  const turns = turnsOf(direction, levels);
  const room = roomFor(sizeOfKets(kets));
  const out: (Block | undefined)[][] = kets.map(() => new Array<Block | undefined>(levels).fill(undefined));
  for (let total = 0; total < levels; total++) {
    if (kets.every((ket) => ket.blocks[total] === undefined)) continue;
    const side = total + 1;
    const columns = new Map<number, Float64Array>();
    kets.forEach((ket, index) => {
      const block = ket.blocks[total];
      if (block === undefined) return;
      const next = room(total);
      const { re: nextRe, im: nextIm } = next;
      for (let n = 0; n < side; n++) {
        const a = block.re[n]!;
        const b = block.im[n]!;
        if (a === 0 && b === 0) continue;
        const c = turns.re[total - n]!;
        const s = turns.im[total - n]!;
        const re = a * c - b * s;
        const im = a * s + b * c;
        let column = columns.get(n);
        if (column === undefined) columns.set(n, (column = splitterColumn(total, n, transmittance)));
        for (let k = 0; k < side; k++) {
          const factor = column[k]!;
          nextRe[k]! += factor * re;
          nextIm[k]! += factor * im;
        }
      }
      for (let k = 0; k < side; k++) {
        const c = turns.re[total - k]!;
        const s = turns.im[total - k]!;
        const re = nextRe[k]!;
        const im = nextIm[k]!;
        nextRe[k] = re * c + im * s;
        nextIm[k] = im * c - re * s;
      }
      out[index]![total] = next;
    });
  }
  return out.map((blocks) => ({ blocks }));
}

/** e^{iφn} for n = 0 … levels − 1. */
function turnsOf(direction: Complex, levels: number): Block {
  const angle = Math.atan2(direction.im, direction.re);
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  for (let n = 0; n < levels; n++) {
    const turn = phase(angle * n);
    re[n] = turn.re;
    im[n] = turn.im;
  }
  return { re, im };
}

function countFilled({ re, im }: Block): number {
  let count = 0;
  for (let n = 0; n < re.length; n++) if (re[n] !== 0 || im[n] !== 0) count++;
  return count;
}

/** Multiplies each amplitude by a phase that depends on one mode's number. */
export function shiftKet(ket: JointKet, mode: 1 | 2, direction: Complex): JointKet {
  const turns = turnsOf(direction, ket.blocks.length);
  return {
    blocks: ket.blocks.map((block, total) => {
      if (block === undefined) return undefined;
      const next = newBlock(total);
      for (let n = 0; n <= total; n++) {
        const own = mode === 1 ? n : total - n;
        const c = turns.re[own]!;
        const s = turns.im[own]!;
        next.re[n] = block.re[n]! * c - block.im[n]! * s;
        next.im[n] = block.re[n]! * s + block.im[n]! * c;
      }
      return next;
    }),
  };
}

/** Σ c_k |k⟩ of kets. */
export function combineKets(kets: readonly JointKet[], amplitudes: readonly Complex[], levels: number): JointKet {
  const builder = new KetBuilder(levels);
  kets.forEach((ket, index) => {
    const c = amplitudes[index]!;
    eachAmplitude(ket, (n1, n2, re, im) => builder.add(n1, n2, c.re * re - c.im * im, c.re * im + c.im * re));
  });
  return builder.ket;
}

/** Goes through the amplitudes of a ket that are not 0. */
export function eachAmplitude(ket: JointKet, visit: (n1: number, n2: number, re: number, im: number) => void): void {
  ket.blocks.forEach((block, total) => {
    if (block === undefined) return;
    for (let n = 0; n <= total; n++) {
      const re = block.re[n]!;
      const im = block.im[n]!;
      if (re !== 0 || im !== 0) visit(n, total - n, re, im);
    }
  });
}

/** ⟨ψ|ψ⟩. */
export function weightOf(ket: JointKet): number {
  let sum = 0;
  for (const block of ket.blocks) {
    if (block === undefined) continue;
    for (let n = 0; n < block.re.length; n++) sum += block.re[n]! ** 2 + block.im[n]! ** 2;
  }
  return sum;
}

/** ⟨φ|ψ⟩. */
export function innerProductOf(phi: JointKet, psi: JointKet): Complex {
  let re = 0;
  let im = 0;
  phi.blocks.forEach((left, total) => {
    const right = psi.blocks[total];
    if (left === undefined || right === undefined) return;
    for (let n = 0; n <= total; n++) {
      re += left.re[n]! * right.re[n]! + left.im[n]! * right.im[n]!;
      im += left.re[n]! * right.im[n]! - left.im[n]! * right.re[n]!;
    }
  });
  return { re, im };
}

/** The kets that a loss of one mode makes of each, one for every number of photons lost. */
export function loseKets(kets: readonly JointKet[], mode: 1 | 2, eta: number): readonly JointKet[] {
  if (eta === 1) return kets;
  const levels = Math.max(0, ...kets.map((ket) => ket.blocks.length));
  checkJointSize(Math.max((sizeOfKets(kets) * levels) / 3, kets.length * levels * levels));
  const rows = lossAmplitudes(levels, eta);
  return branches(kets, levels, levels, (k, n) => (n >= k ? rows[k]![n]! : 0), mode, -1);
}

/** The kets that an amplifier on one mode makes of each, one for every number of photons added. */
export function amplifyKets(kets: readonly JointKet[], mode: 1 | 2, gain: number, levels: number): readonly JointKet[] {
  if (gain === 1) return kets;
  const from = Math.max(0, ...kets.map((ket) => ket.blocks.length));
  // Every branch holds a list of blocks, most of them empty.
  checkJointSize(Math.max(sizeOfKets(kets) * levels, kets.length * levels * levels * 2), from * levels);
  const rows = gainAmplitudes(from, levels, gain);
  return branches(kets, levels, levels, (k, n) => rows[k]?.[n] ?? 0, mode, 1);
}

function branches(
  kets: readonly JointKet[],
  levels: number,
  most: number,
  amplitude: (k: number, n: number) => number,
  mode: 1 | 2,
  sign: 1 | -1,
): readonly JointKet[] {
  const out: JointKet[] = [];
  for (const ket of kets) {
    for (let k = 0; k < most; k++) {
      const builder = new KetBuilder(levels);
      eachAmplitude(ket, (n1, n2, re, im) => {
        const own = mode === 1 ? n1 : n2;
        const factor = amplitude(k, own);
        if (factor === 0 || own + sign * k < 0) return;
        if (mode === 1) builder.add(n1 + sign * k, n2, re * factor, im * factor);
        else builder.add(n1, n2 + sign * k, re * factor, im * factor);
      });
      if (!builder.isEmpty) out.push(builder.ket);
    }
  }
  return out;
}

/** A unitary of one mode on each ket. */
export function applyToMode(ket: JointKet, mode: 1 | 2, unitary: NumberUnitary, levels: number): JointKet {
  const from = ket.blocks.length;
  const builder = new KetBuilder(levels);
  for (let spectator = 0; spectator < from; spectator++) {
    const count = from - spectator;
    const re = new Float64Array(count);
    const im = new Float64Array(count);
    let any = false;
    for (let n = 0; n < count; n++) {
      const block = ket.blocks[spectator + n];
      if (block === undefined) continue;
      const at = mode === 1 ? n : spectator;
      re[n] = block.re[at]!;
      im[n] = block.im[at]!;
      if (re[n] !== 0 || im[n] !== 0) any = true;
    }
    if (!any) continue;
    const moved = applyUnitary(unitary, re, im);
    for (let n = 0; n + spectator < levels && n < moved.re.length; n++) {
      if (mode === 1) builder.add(n, spectator, moved.re[n]!, moved.im[n]!);
      else builder.add(spectator, n, moved.re[n]!, moved.im[n]!);
    }
  }
  return builder.ket;
}

/** How many amplitudes of the other mode are not 0 where `mode` has n photons. */
export function filledIn({ blocks }: JointKet, mode: 1 | 2, n: number): number {
  let count = 0;
  for (let other = 0; n + other < blocks.length; other++) {
    const block = blocks[n + other];
    if (block === undefined) continue;
    const at = mode === 1 ? n : other;
    if (block.re[at] !== 0 || block.im[at] !== 0) count++;
  }
  return count;
}

/** The amplitudes of the other mode where `mode` has n photons. */
export function sliceOf(
  ket: JointKet,
  mode: 1 | 2,
  n: number,
): { readonly re: Float64Array; readonly im: Float64Array } {
  const count = Math.max(0, ket.blocks.length - n);
  const re = new Float64Array(count);
  const im = new Float64Array(count);
  for (let other = 0; other < count; other++) {
    const block = ket.blocks[n + other];
    if (block === undefined) continue;
    const at = mode === 1 ? n : other;
    re[other] = block.re[at]!;
    im[other] = block.im[at]!;
  }
  return { re, im };
}

/** Whether a ket holds nothing. */
export const isEmptyKet = (ket: JointKet): boolean =>
  ket.blocks.every((block) => block === undefined || isEmpty(block));
