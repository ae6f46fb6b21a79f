import { figure } from '../../shared/arm/units';

/** A figure with its unit, in the figure font, with a true minus. */
export function Figure({ value, unit, decimals = 1 }: { value: number; unit: string; decimals?: number }) {
  return (
    <span className="n">
      {figure(value, decimals)}
      {unit === '°' ? '°' : <span className="u">{unit}</span>}
    </span>
  );
}
