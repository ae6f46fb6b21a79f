import { radToDeg } from '../../shared/arm/units';

/** A typed number: decimal comma and true minus are understood. Null when it is none. */
export function parseNumber(text: string): number | null {
  const plain = text.trim().replace('−', '-').replace(',', '.');
  if (plain === '' || !/^[-+]?(\d+\.?\d*|\.\d+)(e[-+]?\d+)?$/i.test(plain)) return null;
  const value = Number(plain);
  return Number.isFinite(value) ? value : null;
}

/** Factors from what may be typed to the unit a field shows. NIST SP 811 for the inch and kilogram-force. */
const TO: Record<string, Record<string, number>> = {
  '°': { '°': 1, deg: 1, rad: radToDeg(1) },
  mm: { mm: 1, cm: 10, m: 1000, in: 25.4 },
  N·cm: {
    n·cm: 1,
    ncm: 1,
    n·m: 100,
    nm: 100,
    kg·cm: 9.80665,
    kgcm: 9.80665,
    ozf·in: 0.706155181,
    oz·in: 0.706155181,
  },
  kg·cm: { kg·cm: 1, kgcm: 1, n·m: 1 / 0.0980665, nm: 1 / 0.0980665, n·cm: 1 / 9.80665, ncm: 1 / 9.80665 },
  g: { g: 1, kg: 1000 },
};

/** "0.335 rad" in a field of degrees is 19.2: the value in the field's unit, and what it was converted from. */
export function parseQuantity(
  text: string,
  unit: string,
): { value: number; convertedFrom: string | null } | null {
  const match = /^\s*([-+−]?[\d.,]+(?:e[-+]?\d+)?)\s*([^\d\s].*)?$/i.exec(text);
  if (!match) return null;
  const value = parseNumber(match[1]!);
  if (value === null) return null;
  const given = match[2]?.trim();
  if (!given || given === unit) return { value, convertedFrom: null };
  const factor = TO[unit]?.[given.toLowerCase().replace('*', '·').replace('.', '·')];
  return factor === undefined ? null : { value: value * factor, convertedFrom: text.trim() };
}
