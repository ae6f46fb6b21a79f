import type { LinkShape } from './model';

export interface Material {
  /** kg/m³ */
  density: number;
  /** Where the figure is from. */
  source: string;
}

/** Room temperature. Printed parts are given solid; they are lighter with less infill. */
export const MATERIALS: Record<LinkShape['material'], Material> = {
  'carbon tube': { density: 1600, source: 'maker data; ASM Handbook vol. 21 (1550–1600)' },
  aluminium: { density: 2700, source: 'ASM Handbook vol. 2, 6061-T6' },
  steel: { density: 7850, source: 'Machinery’s Handbook, carbon steel' },
  'PVC pipe': { density: 1400, source: 'plastics handbooks, PVC-U (1380–1420)' },
  PLA: { density: 1240, source: 'maker data, solid' },
  PETG: { density: 1270, source: 'maker data, solid' },
  ABS: { density: 1045, source: 'maker data, solid (1040–1050)' },
};
