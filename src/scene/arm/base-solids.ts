import { Vector3 } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { type Point, ring, rod, uprightBlock } from '../ink/solids';
import type { Pieces } from './link-solids';
import { baseRadius, unit } from './proportions';

const UP = new Vector3(0, 0, 1);
const BOLTS = 6;

/** What stands on the bench and never moves: a bolted flange and a column up to the first joint. */
export function basePieces(model: ArmModel): Pieces {
  const first = model.joints[0]!;
  const [x, y, z] = first.origin.xyz;
  const radius = baseRadius(model);
  const at = (height: number): Point => [x, y, height];
  if (z < 0.03 || Math.abs(unit(first.axis).z) < 0.7)
    return {
      solids: [
        uprightBlock([x, y, Math.max(0.01, z / 2 - 0.015)], [radius * 1.2, radius, Math.max(0.02, z - 0.03)]),
      ],
      marks: [],
    };
  const flange = Math.min(0.012, z * 0.2);
  const step = Math.min(z * 0.5, 0.05);
  const solids = [
    rod(at(0), at(flange), radius),
    rod(at(flange), at(step), radius * 0.72, radius * 0.7),
    rod(at(step), at(z), radius * 0.47),
  ];
  const top = at(flange + 0.0003);
  const bolts = Array.from({ length: BOLTS }, (_, k) => {
    const angle = ((k + 0.5) / BOLTS) * 2 * Math.PI;
    const centre: Point = [
      x + Math.cos(angle) * radius * 0.86,
      y + Math.sin(angle) * radius * 0.86,
      flange + 0.0004,
    ];
    return ring(centre, UP, radius * 0.055, 12);
  }).flat();
  return {
    solids,
    marks: [
      { segments: bolts, lift: 0.0008, kind: 'thin' },
      { segments: ring(top, UP, radius * 0.96), lift: 0.0008, kind: 'thin' },
    ],
  };
}
