import { useMemo } from 'react';
import { Vector3 } from 'three';
import type { BenchObject } from '../../../shared/arm/model';
import { Drawn } from '../ink/Drawn';
import { draw } from '../ink/drawing';
import { type Marks, type Point, ring, rod, type Solid, uprightBlock } from '../ink/solids';

const UP = new Vector3(0, 0, 1);

/** What stands on the bench: a tray of vials, a scale, a box. */
export function Bench({ objects }: { objects: readonly BenchObject[] }) {
  return objects.map((object) => <Standing key={object.name} object={object} />);
}

function Standing({ object }: { object: BenchObject }) {
  const drawing = useMemo(() => {
    const { solids, marks } = PIECES[object.kind](object.size);
    return draw([uprightBlock([0, 0, 0], object.size), ...solids], marks);
  }, [object]);
  return (
    <group position={object.centre} rotation={[0, 0, object.yaw]}>
      <Drawn drawing={drawing} />
    </group>
  );
}

type Size = readonly [number, number, number];
interface Extra {
  solids: Solid[];
  marks: Marks[];
}

const PIECES: Record<BenchObject['kind'], (size: Size) => Extra> = {
  box: () => ({ solids: [], marks: [] }),
  tray: ([width, depth, height]) => {
    const solids: Solid[] = [];
    const holes: Point[] = [];
    const radius = Math.min(width / 4, depth / 3) * 0.21;
    const top = height / 2;
    for (let row = 0; row < 3; row++)
      for (let column = 0; column < 4; column++) {
        const x = ((column + 0.5) / 4 - 0.5) * width * 0.9;
        const y = ((row + 0.5) / 3 - 0.5) * depth * 0.85;
        solids.push(
          rod([x, y, top - 0.001], [x, y, top + 0.02], radius),
          rod([x, y, top + 0.02], [x, y, top + 0.03], radius * 1.12, radius * 1.12, 'dark'),
        );
        holes.push(...ring([x, y, top + 0.0003], UP, radius * 1.45, 20));
      }
    return { solids, marks: [{ segments: holes, lift: 0.0006, kind: 'thin' }] };
  },
  scale: ([width, depth, height]) => {
    const radius = Math.min(width, depth) * 0.33;
    const top = height / 2;
    const front: Point[] = [
      [-0.22, 0.12],
      [0.22, 0.12],
      [0.22, -0.22],
      [-0.22, -0.22],
    ].map(([x, z]) => [x! * width, -depth / 2 - 0.0004, z! * height] as const);
    return {
      solids: [
        rod([0, 0, top], [0, 0, top + 0.005], radius * 0.5),
        rod([0, 0, top + 0.005], [0, 0, top + 0.011], radius),
      ],
      marks: [
        { segments: ring([0, 0, top + 0.0113], UP, radius * 0.86), lift: 0.0006, kind: 'thin' },
        {
          segments: front.flatMap((corner, k) => [corner, front[(k + 1) % 4]!]),
          lift: 0.0008,
          kind: 'thin',
        },
      ],
    };
  },
};
