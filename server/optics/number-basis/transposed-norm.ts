import { MethodDoesNotApply } from '../method-does-not-apply';
import { eachAmplitude, type JointKet } from './joint-ket';
import { hermitianEigenvalues } from './linear-algebra';

/** Rows of a matrix that is kept whole (2 × 23 MB); wider ones are kept entry by entry. */
const WIDEST_WHOLE = 1_700;
const MOST_PAIRS = 3e7;
const MOST_ENTRIES = 2e6;
/** Cubes of the sizes of all blocks together: about a second. */
const MOST_WORK = 1.2e8;

/** Entries of a Hermitian matrix, of which those at or above the diagonal are kept. */
interface Entries {
  add(row: number, column: number, re: number, im: number): void;
  each(visit: (row: number, column: number, re: number, im: number) => void): void;
}

function wholeMatrix(side: number): Entries {
  const re = new Float64Array(side * side);
  const im = new Float64Array(side * side);
  return {
    add(row, column, a, b) {
      const at = row * side + column;
      re[at]! += a;
      im[at]! += b;
    },
    each(visit) {
      for (let row = 0; row < side; row++) {
        for (let column = row; column < side; column++) {
          const at = row * side + column;
          if (re[at] !== 0 || im[at] !== 0) visit(row, column, re[at]!, im[at]!);
        }
      }
    },
  };
}

function sparseMatrix(side: number): Entries {
  const places = new Map<number, number>();
  const re: number[] = [];
  const im: number[] = [];
  return {
    add(row, column, a, b) {
      const key = row * side + column;
      const place = places.get(key);
      if (place === undefined) {
        if (re.length >= MOST_ENTRIES) throw new MethodDoesNotApply('the transposed state would be too large');
        places.set(key, re.push(a) - 1);
        im.push(b);
        return;
      }
      re[place]! += a;
      im[place]! += b;
    },
    each(visit) {
      for (const [key, place] of places) visit(Math.floor(key / side), key % side, re[place]!, im[place]!);
    },
  };
}

/**
 * ‖ρ^{T₂}‖₁ of ρ = Σ|ψ_k⟩⟨ψ_k|: the sum of the sizes of the eigenvalues, block by block of what hangs together.
 *
 * @param kets ψ_k, their weights in their norms
 * @param levels total photon numbers 0 … levels − 1
 * @throws MethodDoesNotApply where it would take too much memory or time
 */
export function transposedNorm(kets: readonly JointKet[], levels: number): number {
  const side = levels * levels;
  const entries = side <= WIDEST_WHOLE ? wholeMatrix(side) : sparseMatrix(side);
  let pairs = 0;
  for (const ket of kets) {
    const n: number[] = [];
    const m: number[] = [];
    const re: number[] = [];
    const im: number[] = [];
    eachAmplitude(ket, (first, second, a, b) => {
      n.push(first);
      m.push(second);
      re.push(a);
      im.push(b);
    });
    pairs += n.length ** 2 / 2;
    if (pairs > MOST_PAIRS) throw new MethodDoesNotApply('the transposed state would take too long');
    for (let j = 0; j < n.length; j++) {
      for (let k = j; k < n.length; k++) {
        // ρ_{(n,m),(n',m')} stands at row (n, m') and column (n', m) of ρ^{T₂}.
        const row = n[j]! * levels + m[k]!;
        const column = n[k]! * levels + m[j]!;
        const a = re[j]! * re[k]! + im[j]! * im[k]!;
        const b = im[j]! * re[k]! - re[j]! * im[k]!;
        // The pair the other way round stands across the diagonal, conjugate.
        if (row < column) entries.add(row, column, a, b);
        else if (row > column) entries.add(column, row, a, -b);
        else entries.add(row, row, j === k ? a : 2 * a, 0);
      }
    }
  }
  return blocksOf(entries, side).reduce((norm, block) => norm + block(), 0);
}

/** The blocks of a matrix that hang together, each to be asked for the sum of the sizes of its eigenvalues. */
function blocksOf(entries: Entries, side: number): (() => number)[] {
  const parent = Int32Array.from({ length: side }, (_, index) => index);
  const find = (index: number): number => {
    let root = index;
    while (parent[root] !== root) root = parent[root]!;
    for (let at = index; at !== root;) {
      const next = parent[at]!;
      parent[at] = root;
      at = next;
    }
    return root;
  };
  const used = new Uint8Array(side);
  entries.each((row, column) => {
    used[row] = 1;
    used[column] = 1;
    parent[find(row)] = find(column);
  });
  const place = new Int32Array(side);
  const sizes = new Map<number, number>();
  for (let index = 0; index < side; index++) {
    if (!used[index]) continue;
    const root = find(index);
    const size = sizes.get(root) ?? 0;
    place[index] = size;
    sizes.set(root, size + 1);
  }
  let work = 0;
  const matrices = new Map<number, { size: number; re: Float64Array; im: Float64Array }>();
  for (const [root, size] of sizes) {
    work += size ** 3;
    if (work > MOST_WORK) throw new MethodDoesNotApply('the eigenvalues of the transposed state would take too long');
    matrices.set(root, { size, re: new Float64Array(size * size), im: new Float64Array(size * size) });
  }
  entries.each((row, column, a, b) => {
    const matrix = matrices.get(find(row));
    if (matrix === undefined) return;
    const [i, j] = [place[row]!, place[column]!];
    matrix.re[i * matrix.size + j] = a;
    matrix.re[j * matrix.size + i] = a;
    matrix.im[i * matrix.size + j] = b;
    matrix.im[j * matrix.size + i] = -b;
  });
  return [...matrices.values()].map(
    ({ size, re, im }) =>
      () =>
        hermitianEigenvalues(size, re, im).reduce((sum, eigenvalue) => sum + Math.abs(eigenvalue), 0),
  );
}
