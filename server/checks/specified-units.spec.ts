import { describe, expect, it } from 'vitest';
import { judgeLine, numberWith, verdictOf } from './testing/judge-line';

const tight = { tolerance: { relative: 1e-3 } };
type Case = readonly [text: string, verdict: string];

/** Judges answers against one key in one unit. */
function judged(
  key: string,
  unit: string | undefined,
  cases: readonly Case[],
  more: Record<string, unknown> = {},
): void {
  const part = numberWith(key, { ...tight, ...(unit === undefined ? {} : { unit }), ...more });
  it.each(cases)(`a key of ${key} and %s: %s`, (text, verdict) => expect(verdictOf(part, text)).toBe(verdict));
}

describe('frequencies', () => {
  judged('3 MHz', 'MHz', [
    ['3 MHz', 'right 1'],
    ['3MHz', 'right 1'],
    ['3\u2009MHz', 'right 1'],
    ['3,0 MHz', 'right 1'],
    ['3·10⁶ Hz', 'right 1'],
    ['3e6 Hz', 'right 1'],
    ['0.003 GHz', 'right 1'],
    ['3 000 kHz', 'right 1'],
    ['3e6 s^-1', 'right 1'],
    ['3e6 s⁻¹', 'right 1'],
    ['3e6 1/s', 'right 1'],
    ['3e6/s', 'right 1'],
    ['3e6 s^{-1}', 'right 1'],
    ['3 µs⁻¹', 'right 1'],
    ['3 /µs', 'right 1'],
    ['3 us^-1', 'right 1'],
    ['f = 3 MHz', 'right 1'],
    ['3', 'unit 0.5'],
    ['3,0', 'unit 0.5'],
    ['3e6', 'wrong 0'],
    ['4', 'wrong 0'],
    ['3 mHz', 'wrong 0'],
    ['3 kHz', 'wrong 0'],
    ['3 Mrad/s', 'wrong 0'],
    ['3e6 rad/s', 'wrong 0'],
    ['18.85e6 rad/s', 'wrong 0'],
    ['3 MHz/m', 'wrong 0'],
    ['3 m', 'wrong 0'],
    ['3 MHzz', 'unreadable 0'],
    ['3 mhz', 'unreadable 0'],
    ['3 M', 'unreadable 0'],
    ['MHz', 'unreadable 0'],
    ['3 MHz 4', 'unreadable 0'],
    ['3 MHz or 4 MHz', 'unreadable 0'],
    ['3,000 MHz', 'unreadable 0'],
  ]);
  judged('2e6 rad/s', 'rad/s', [
    ['2e6 rad/s', 'right 1'],
    ['2·10^6 rad s^-1', 'right 1'],
    ['2·10⁶ rad s⁻¹', 'right 1'],
    ['2 rad/µs', 'right 1'],
    ['2 rad/us', 'right 1'],
    ['2 rad/μs', 'right 1'],
    ['2 Mrad/s', 'right 1'],
    ['2e6 s^-1', 'right 1'],
    ['2e6 1/s', 'right 1'],
    ['2e6', 'unit 0.5'],
    ['2 MHz', 'wrong 0'],
    ['2e6 Hz', 'wrong 0'],
    ['0.31831 MHz', 'wrong 0'],
  ]);
  judged('2e6 s^-1', 's^-1', [
    ['2e6 s^-1', 'right 1'],
    ['2 MHz', 'right 1'],
    ['2e6 rad/s', 'right 1'],
    ['2e6 Bq', 'right 1'],
    ['2e6', 'unit 0.5'],
  ]);
  judged('2 pi 3 MHz', 'rad/s', [
    ['3 MHz', 'error: The key comes in Hz, which is not the kind of quantity that rad/s measures.'],
  ]);
});

describe('lengths, energies, powers', () => {
  judged('589.3 nm', 'nm', [
    ['589.3 nm', 'right 1'],
    ['589.3nm', 'right 1'],
    ['0.5893 µm', 'right 1'],
    ['0.5893 μm', 'right 1'],
    ['0.5893 um', 'right 1'],
    ['0.5893 \\mu m', 'right 1'],
    ['5893 Å', 'right 1'],
    ['5893 angstrom', 'right 1'],
    ['5.893e-7 m', 'right 1'],
    ['5.893e-5 cm', 'right 1'],
    ['589.3', 'unit 0.5'],
    ['5.893e-7', 'wrong 0'],
    ['589.3 m', 'wrong 0'],
    ['589.3 nm/s', 'wrong 0'],
    ['589.3 nm^2', 'wrong 0'],
    ['589.3 %', 'wrong 0'],
  ]);
  judged('photonEnergy(633 nm)', 'eV', [
    ['1.9587 eV', 'right 1'],
    ['1958.7 meV', 'right 1'],
    ['3.138e-19 J', 'right 1'],
    ['0.3138 aJ', 'right 1'],
    ['1.9587', 'unit 0.5'],
    ['3.138e-19', 'wrong 0'],
    ['1.9587 V', 'wrong 0'],
  ]);
  judged('2.5 mW', 'mW', [
    ['2.5 mW', 'right 1'],
    ['2.5e-3 J/s', 'right 1'],
    ['0.0025 kg m^2 s^-3', 'right 1'],
    ['2.5 MW', 'wrong 0'],
  ]);
  judged('300 K', 'K', [
    ['300 K', 'right 1'],
    ['26.85 °C', 'right 1'],
    ['300', 'unit 0.5'],
  ]);
  judged('30 ns', 'ns', [
    ['30 ns', 'right 1'],
    ['0.03 µs', 'right 1'],
    ['3e-8 s', 'right 1'],
    ['3·10⁻⁸ s', 'right 1'],
    ['60/2 ns', 'right 1'],
    ['60 ns/2', 'right 1'],
    ['60√4/4 ns', 'right 1'],
    ['30/(1 GHz)', 'right 1'],
    ['30 nm/(1 m/s)', 'right 1'],
    ['30 nm/1 m s', 'wrong 0'],
    ['30 nm', 'wrong 0'],
  ]);
  judged('(pi/2) rad', 'rad', [
    ['pi/2 rad', 'right 1'],
    ['π/2 rad', 'right 1'],
    ['0.5 π rad', 'right 1'],
    ['3π/6 rad', 'right 1'],
    ['√4 π/4 rad', 'right 1'],
    ['90°', 'right 1'],
    ['90 deg', 'right 1'],
    ['1.5708', 'unit 0.5'],
    ['90', 'wrong 0'],
  ]);
});

describe('keys without unit', () => {
  judged('0.35', undefined, [
    ['0.35', 'right 1'],
    ['35%', 'right 1'],
    ['35 %', 'right 1'],
    ['35\u2009%', 'right 1'],
    ['35 percent', 'unreadable 0'],
    ['35', 'wrong 0'],
    ['0.35 m', 'wrong 0'],
    ['0.35 rad', 'wrong 0'],
    ['0.35 dB', 'wrong 0'],
    ['0.35 Hz', 'wrong 0'],
    ['0.35 s/s', 'right 1'],
  ]);
});

describe('decibels', () => {
  judged('-10*log10(exp(-1.2))', 'dB', [
    ['5.2115 dB', 'right 1'],
    ['5.2115dB', 'right 1'],
    ['5,2115 dB', 'right 1'],
    ['5.2115', 'unit 0.5'],
    ['5.2115 m', 'wrong 0'],
    ['-5.2115 dB', 'wrong 0'],
    ['3.3201', 'wrong 0'],
    ['521.15 %', 'unit 0.5'],
  ]);
  it('is never converted: a ratio of the same size is another number', () => {
    const part = numberWith('3.3201', tight);
    expect(verdictOf(part, '5.2115 dB')).toBe('wrong 0');
  });
});

describe('fractions without unit', () => {
  judged('2e6 rad/s', 'rad/s', [['2e6', 'unit 0.25']], { unitFraction: 0.25 });
  judged('2e6 rad/s', 'rad/s', [['2e6', 'unit 0']], { unitFraction: 0 });
  judged('2e6 rad/s', 'rad/s', [['2e6', 'unit 1']], { unitFraction: 1 });
});

describe('the read-back of units', () => {
  it('asks for the unit where the hint has one, whatever the key is', () => {
    const checked = judgeLine(numberWith('3 MHz', { unit: 'MHz' }), '7');
    expect(checked).toMatchObject({ verdict: 'wrong', readAs: '7' });
  });

  it.each([
    ['3e6 s^-1', '3 × 10⁶ s⁻¹'],
    ['2 rad/us', '2 rad/µs'],
    ['0.5893 um', '0.5893 µm'],
    ['35%', '0.35'],
    ['P = 0.35', '0.35'],
    ['sqrt(2)/2', '0.7071068'],
    ['1234567', '1\u202f234\u202f567'],
  ])('%s reads as %s', (text, readAs) => {
    expect(judgeLine(numberWith('3 MHz', { unit: 'MHz' }), text)).toMatchObject({ readAs });
  });
});
