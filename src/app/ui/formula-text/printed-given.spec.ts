import { formulaOfUnit, givenInFormula, givenInText } from './printed-given';

describe('printed givens', () => {
  it.each([
    ['W/m^2', '\\text{W}/\\text{m}^{2}'],
    ['s⁻¹', '\\text{s}^{-1}'],
    ['1/s', '1/\\text{s}'],
    ['N*m', '\\text{N}\\,\\text{m}'],
    ['µs', '\\text{µs}'],
    ['%', '\\text{\\%}'],
    ['\\evil{', '\\text{evil\\{}'],
  ])('writes the unit %s upright', (unit, tex) => {
    expect(formulaOfUnit(unit)).toBe(tex);
  });

  it('prints value and unit', () => {
    expect(givenInFormula('P', { printed: '2.40', unit: 'pW' })).toBe('2.40\\,\\text{pW}');
    expect(givenInText('P', { printed: '2.40', unit: 'pW' })).toBe('2.40\u00a0pW');
  });

  it('writes powers of ten out', () => {
    expect(givenInFormula('r', { printed: '7.65e6' })).toBe('7.65 \\times 10^{6}');
    expect(givenInText('r', { printed: '-7.65e-12' })).toBe('−7.65 × 10⁻¹²');
  });

  it('lets a name that no given has stand for itself', () => {
    expect(givenInFormula('n_bar', undefined)).toBe('\\mathtt{n\\_bar}');
    expect(givenInText('n_bar', undefined)).toBe('n_bar');
  });
});
