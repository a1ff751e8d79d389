import { describe, expect, it } from 'vitest';
import { comparable } from './dimension';
import { readAnswer } from './read-answer';
import { readUnit } from './unit-part';
import { unitByName } from './units';

const read = (text: string) => readAnswer(text, { form: 'number', hint: 'with a unit', unit: 'MHz' });

describe('units', () => {
  // SI Brochure, 9th edition (2019), tables 4, 7 and 8: prefixes, derived units, units accepted for use with the SI.
  it.each([
    ['3MHz', 3e6, '3 MHz'],
    ['3 000 kHz', 3e6, '3000 kHz'],
    ['3e6 s^-1', 3e6, '3 × 10⁶ s⁻¹'],
    ['3e6 s⁻¹', 3e6, '3 × 10⁶ s⁻¹'],
    ['7.65e6 1/s', 7.65e6, '7.65 × 10⁶ s⁻¹'],
    ['7.65e6/s', 7.65e6, '7.65 × 10⁶ s⁻¹'],
    ['3 mHz', 3e-3, '3 mHz'],
    ['2 rad/µs', 2e6, '2 rad/µs'],
    ['2 rad/μs', 2e6, '2 rad/µs'],
    ['2 rad/us', 2e6, '2 rad/µs'],
    ['2 rad us^-1', 2e6, '2 rad/µs'],
    ['3 \\mu s', 3e-6, '3 µs'],
    ['3 \\mathrm{MHz}', 3e6, '3 MHz'],
    ['5893 angstrom', 5.893e-7, '5893 Å'],
    ['5893 Å', 5.893e-7, '5893 Å'],
    ['5893 A\u030a', 5.893e-7, '5893 Å'],
    ['589.3nm', 5.893e-7, '589.3 nm'],
    ['1 nanometre', 1e-9, '1 nm'],
    ['1.96 eV', 1.96 * 1.602176634e-19, '1.96 eV'],
    ['5 W/m^2 K', 5, '5 W m⁻² K⁻¹'],
    ['5 W/(m^2 K)', 5, '5 W m⁻² K⁻¹'],
    ['2 min', 120, '2 min'],
    ['1 h', 3600, '1 h'],
    ['25 °C', 298.15, '25 °C'],
    ['90°', Math.PI / 2, '90°'],
    ['90^\\circ', Math.PI / 2, '90°'],
    ['1 kg m^2/s^2', 1, '1 kg m²/s²'],
    ['2 J s', 2, '2 J s'],
    ['1/2 MHz', 5e5, '0.5 MHz'],
    ['3 m / 4 s', 0.75, '0.75 m/s'],
    ['5.21 dB', 5.21, '5.21 dB'],
  ])('reads %s', (text, si, readAs) => {
    const reading = read(text);
    expect(reading).toMatchObject({ kind: 'number', readAs });
    if (reading.kind === 'number') expect(Math.abs(reading.si / si - 1)).toBeLessThan(1e-14);
  });

  it('asks for a unit where one is printed and none is typed', () => {
    expect(read('3')).toMatchObject({ kind: 'number', note: 'Which unit? Taken in MHz.' });
    expect(read('3 kHz')).not.toHaveProperty('note');
  });

  it('tells names from prefixes', () => {
    expect(unitByName('min')?.factor).toBe(60);
    expect(unitByName('cd')?.dimension.cd).toBe(1);
    expect(unitByName('mm')?.factor).toBe(1e-3);
    expect(unitByName('Pa')?.factor).toBe(1);
    expect(unitByName('MHzz')).toBeUndefined();
    expect(unitByName('constructor')).toBeUndefined();
    expect(unitByName('')).toBeUndefined();
  });

  it('never takes hertz for radians per second, and s⁻¹ for either', () => {
    const dimension = (text: string) => {
      const unit = readUnit(text);
      if (!unit) throw new Error(text);
      return unit.dimension;
    };
    expect(comparable(dimension('Hz'), dimension('rad/s'))).toBe(false);
    expect(comparable(dimension('kHz'), dimension('MHz'))).toBe(true);
    expect(comparable(dimension('s^-1'), dimension('Hz'))).toBe(true);
    expect(comparable(dimension('1/s'), dimension('rad/s'))).toBe(true);
    expect(comparable(dimension('rad/s'), dimension('deg/s'))).toBe(true);
    expect(comparable(dimension('dB'), dimension('m'))).toBe(false);
    expect(comparable(dimension('J'), dimension('eV'))).toBe(true);
    expect(comparable(dimension('W/Hz'), dimension('J'))).toBe(true);
  });

  it('reads units as a computed key names them', () => {
    expect(readUnit('kg m^2 / s^2')?.factor).toBe(1);
    expect(readUnit('(kg m^2) / s^2')?.dimension).toEqual(readUnit('J')?.dimension);
    expect(readUnit('rad / s')?.text).toBe('rad/s');
    expect(readUnit('no unit')).toBeUndefined();
    expect(readUnit('2 m')).toBeUndefined();
  });
});
