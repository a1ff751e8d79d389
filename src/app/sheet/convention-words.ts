import type { Convention } from '@shared/primitives';

/** A convention as a sheet prints it, with formulas. */
export function conventionInWords({ vacuumVariance, squeezingSign, splitterPhase }: Convention): string {
  const variance = { 0.25: '\\tfrac14', 0.5: '\\tfrac12', 1: '1' }[vacuumVariance];
  const quadrature = {
    0.25: '(a + a^\\dagger)/2',
    0.5: '(a + a^\\dagger)/\\sqrt2',
    1: 'a + a^\\dagger',
  }[vacuumVariance];
  const squeezed = squeezingSign === 1 ? 'x' : 'p';
  const splitter =
    splitterPhase === 0
      ? 'a splitter reflects with the phases $0$ and $\\pi$'
      : 'a splitter reflects with the phase $\\pi/2$ on both sides';
  return `$x = ${quadrature}$, so that the vacuum has $\\mathrm{Var}\\,x = ${variance}$; positive $r$ squeezes $${squeezed}$; ${splitter}.`;
}
