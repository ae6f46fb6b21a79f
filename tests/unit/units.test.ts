import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  degToRad,
  figure,
  fromShown,
  kgfCmToNm,
  mmToM,
  NEWTON_METRE_PER_LBF_IN,
  NEWTON_METRE_PER_OZF_IN,
  ncmToNm,
  nmToKgfCm,
  radPerSToSecondsPer60Deg,
  radToDeg,
  secondsPer60DegToRadPerS,
  shownValue,
  toShown,
} from '../../shared/arm/units';

describe('torque units', () => {
  // g_n = 9.80665 m/s² exactly (3rd CGPM, 1901; SI Brochure): 20 kgf·cm = 1.96133 N·m.
  it('makes 20 kgf·cm 1.96133 N·m, exactly', () => {
    expect(kgfCmToNm(20)).toBeCloseTo(1.96133, 12);
    expect(kgfCmToNm(1)).toBe(0.0980665);
  });

  // NIST SP 811 (2008), appendix B.8: ounce-force inch 7.061 552 E−03, pound-force inch 1.129 848 E−01.
  it('has the factors of NIST SP 811 to all digits printed there', () => {
    expect(NEWTON_METRE_PER_OZF_IN).toBeCloseTo(7.061552e-3, 9);
    expect(NEWTON_METRE_PER_LBF_IN).toBeCloseTo(1.129848e-1, 7);
  });

  // 16 ounces to the pound: an independent relation between two separately typed factors.
  it('has 16 ounce-force inches in a pound-force inch', () => {
    expect(16 * NEWTON_METRE_PER_OZF_IN).toBeCloseTo(NEWTON_METRE_PER_LBF_IN, 9);
  });

  // 0.45359237 kg (1959 agreement) · 9.80665 m/s² · 0.0254 m, each exact.
  it('has the pound-force inch that its definition gives', () => {
    expect(NEWTON_METRE_PER_LBF_IN).toBeCloseTo(0.45359237 * 9.80665 * 0.0254, 9);
  });

  it('makes 59 N·cm 0.59 N·m', () => {
    expect(ncmToNm(59)).toBeCloseTo(0.59, 15);
  });

  it('comes back unchanged', () => {
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), (x) => {
        expect(nmToKgfCm(kgfCmToNm(x))).toBeCloseTo(x, 6);
      }),
    );
  });
});

describe('servo speed', () => {
  // 0.10 s/60° = 600 °/s = 10.471976 rad/s; 0.16: 375 °/s, 6.544985 rad/s; 0.20: 300 °/s, 5.235988 rad/s.
  it.each([
    [0.1, 10.471976, 600],
    [0.16, 6.544985, 375],
    [0.2, 5.235988, 300],
  ])('of %f s/60° is %f rad/s and %f °/s', (seconds, radPerS, degPerS) => {
    expect(secondsPer60DegToRadPerS(seconds)).toBeCloseTo(radPerS, 6);
    expect(radToDeg(secondsPer60DegToRadPerS(seconds))).toBeCloseTo(degPerS, 9);
    expect(radPerSToSecondsPer60Deg(radPerS)).toBeCloseTo(seconds, 6);
  });
});

describe('angles and lengths', () => {
  it.each([
    [180, Math.PI],
    [-90, -Math.PI / 2],
    [57.29577951308232, 1],
  ])('%f° is %f rad', (deg, rad) => {
    expect(degToRad(deg)).toBeCloseTo(rad, 14);
    expect(radToDeg(rad)).toBeCloseTo(deg, 12);
  });

  it('25.4 mm is an inch, 0.0254 m', () => {
    expect(mmToM(25.4)).toBeCloseTo(0.0254, 15);
  });

  it('are shown in degrees on a turning joint and in millimetres on a sliding one, and read back', () => {
    expect(toShown('revolute', Math.PI)).toBe(180);
    expect(toShown('prismatic', 0.12)).toBe(120);
    for (const type of ['revolute', 'prismatic'] as const)
      expect(fromShown(type, toShown(type, 0.335))).toBeCloseTo(0.335, 15);
  });

  // True minus U+2212, a space before the unit except °.
  it.each([
    ['revolute', 0.335, '19.2°'],
    ['revolute', -0.335, '−19.2°'],
    ['prismatic', 0.0142, '14.2 mm'],
    ['prismatic', -0.00001, '0.0 mm'],
  ] as const)('%s %f reads %s', (type, value, text) => {
    expect(shownValue(type, value)).toBe(text);
  });

  it('never read “minus nothing”', () => {
    expect(figure(-0.04, 1)).toBe('0.0');
  });
});
