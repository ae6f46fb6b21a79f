/**
 * Conversions between what people type and what the product computes in. Factors are exact where the
 * definition is; others from NIST Special Publication 811 (2008), appendix B.
 */
export const degToRad = (deg: number): number => (deg * Math.PI) / 180;
export const radToDeg = (rad: number): number => (rad * 180) / Math.PI;
export const mmToM = (mm: number): number => mm / 1000;
export const mToMm = (m: number): number => m * 1000;

/** 1 kgf·cm in N·m, exact by the definition of standard gravity. */
export const NEWTON_METRE_PER_KGF_CM = 0.0980665;
/** NIST SP 811: ounce-force inch 7.061552 E−03 N·m. */
export const NEWTON_METRE_PER_OZF_IN = 0.00706155181;
/** NIST SP 811: pound-force inch 1.129848 E−01 N·m. */
export const NEWTON_METRE_PER_LBF_IN = 0.112984829;

export const kgfCmToNm = (kgfCm: number): number => kgfCm * NEWTON_METRE_PER_KGF_CM;
export const nmToKgfCm = (nm: number): number => nm / NEWTON_METRE_PER_KGF_CM;
export const ncmToNm = (ncm: number): number => ncm / 100;

/** A servo's "0.16 s/60°" as rad/s, and back. */
export const secondsPer60DegToRadPerS = (seconds: number): number => Math.PI / 3 / seconds;
export const radPerSToSecondsPer60Deg = (radPerS: number): number => Math.PI / 3 / radPerS;

/** Joint values as people read them: degrees for turning joints, mm for sliding ones. */
export function toShown(type: 'revolute' | 'prismatic', value: number): number {
  return type === 'revolute' ? radToDeg(value) : mToMm(value);
}
export function fromShown(type: 'revolute' | 'prismatic', shown: number): number {
  return type === 'revolute' ? degToRad(shown) : mmToM(shown);
}
export function shownUnit(type: 'revolute' | 'prismatic'): '°' | 'mm' {
  return type === 'revolute' ? '°' : 'mm';
}

/** A figure with a true minus (U+2212). */
export function figure(value: number, decimals: number): string {
  const text = Math.abs(value).toFixed(decimals);
  return value < 0 && Number(text) !== 0 ? `−${text}` : text;
}

/** "18.4°" or "14.2 mm": a space before the unit except °. */
export function shownValue(type: 'revolute' | 'prismatic', value: number, decimals = 1): string {
  const unit = shownUnit(type);
  return `${figure(toShown(type, value), decimals)}${unit === '°' ? '' : ' '}${unit}`;
}
