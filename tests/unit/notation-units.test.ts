import { describe, expect, test } from 'vitest';
import { Dimension, DIMENSIONS, parseUnit, UNIT_NAMES } from '../../server/src/notation/index';
import { Rational } from '../../server/src/expression/rational';

const dim = (text: string): string => {
  const r = parseUnit(text);
  return 'error' in r ? r.error : r.dimension.toString();
};

describe('units', () => {
  test.each([
    ['m', 'm'], ['kg', 'kg'], ['s', 's'], ['1', '1'], ['rad', '1'], ['deg', '1'], ['°', '1'], ['%', '1'], ['-', '1'], ['sr', '1'],
    ['m/s^2', 'm/s^2'], ['m s^-2', 'm/s^2'], ['m s⁻²', 'm/s^2'], ['m/s²', 'm/s^2'], ['m/s/s', 'm/s^2'], ['m/s2', 'm/s^2'], ['m/s**2', 'm/s^2'],
    ['N', 'kg m/s^2'], ['N s / m', 'kg/s'], ['N*s/m', 'kg/s'], ['N·s/m', 'kg/s'], ['N⋅s/m', 'kg/s'], ['N/(m/s)', 'kg/s'],
    ['J', 'kg m^2/s^2'], ['N m', 'kg m^2/s^2'], ['Nm', 'kg m^2/s^2'], ['N m/rad', 'kg m^2/s^2'], ['kg m^2', 'kg m^2'], ['kg·m²', 'kg m^2'],
    ['W', 'kg m^2/s^3'], ['rad/s', '1/s'], ['rpm', '1/s'], ['Hz', '1/s'], ['1/s', '1/s'], ['s^-1', '1/s'],
    ['J/kg K', 'm^2/(s^2 K)'], ['N/m^(3/2)', 'kg/(m^(1/2) s^2)'], ['m^0.5', 'm^(1/2)'], ['mm', 'm'], ['kN/mm', 'kg/s^2'], ['lbf', 'kg m/s^2'], ['ft', 'm'],
    ['V', 'kg m^2/(s^3 A)'], ['N m/A', 'kg m^2/(s^2 A)'], ['Ω', 'kg m^2/(s^3 A^2)'], ['H', 'kg m^2/(s^2 A^2)'], ['μm', 'm'], ['°C', 'K'], ['MPa', 'kg/(m s^2)'],
  ])('%s', (text, expected) => expect(dim(text)).toBe(expected));

  test.each([
    ['', 'the unit is missing'], ['Kg', 'did you mean `kg`?'], ['newtn', 'did you mean `newton`?'], ['foo', 'unknown unit `foo`'], ['2 m', 'a unit has no number'],
    ['m^', 'a number is expected after `^`'], ['(m', 'is not closed'], ['m)', 'is not expected'], ['m/', 'ends where another factor is expected'], ['__proto__', 'unknown unit'],
    ['constructor', 'unknown unit'], ['m'.repeat(300), 'too long'], ['😀', 'unknown unit'],
  ])('%j', (text, message) => expect(dim(text)).toContain(message));

  test('every name offered is a unit', () => expect(UNIT_NAMES.filter((u) => 'error' in parseUnit(u))).toEqual([]));
  test('many brackets', () => expect(dim('('.repeat(200))).toContain('too many brackets'));
});

describe('dimensions', () => {
  const { energy, length, time } = DIMENSIONS;
  test('multiply and divide', () => expect(energy.divide(length).equals(DIMENSIONS.force)).toBe(true));
  test('power', () => expect(length.power(Rational.of(1, 2)).toString()).toBe('m^(1/2)'));
  test('none', () => expect(time.divide(time).isNone).toBe(true));
  test('described by name', () => expect(energy.describe()).toBe('in J (kg m^2/s^2)'));
  test('described without one', () => expect(Dimension.NONE.describe()).toBe('without a unit'));
});
