/**
 * Nodes and weights of Gauss and Legendre on [−1, 1], by Newton's method on P_n.
 *
 * Source: DLMF 3.5(v); starting values (k + 3/4)π/(n + 1/2).
 * @param count number of nodes, 1 or more
 */
export function gaussLegendre(count: number): readonly { readonly x: number; readonly w: number }[] {
  return Array.from({ length: count }, (_, k) => {
    let x = Math.cos((Math.PI * (k + 0.75)) / (count + 0.5));
    let slope = 1;
    for (let step = 0; step < 100; step++) {
      let before = 1;
      let here = x;
      for (let n = 1; n < count; n++) {
        const next = ((2 * n + 1) * x * here - n * before) / (n + 1);
        before = here;
        here = next;
      }
      slope = (count * (x * here - before)) / (x * x - 1);
      const move = here / slope;
      x -= move;
      if (Math.abs(move) < 1e-16) break;
    }
    return { x, w: 2 / ((1 - x * x) * slope * slope) };
  });
}
