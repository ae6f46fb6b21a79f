import { useMemo } from 'react';
import { BufferAttribute, BufferGeometry } from 'three';
import type { BenchObject } from '../../shared/arm/model';
import { useInks } from './inks';
import { Box, Cylinder } from './Solid';

const HALF = 0.6;
const CELL = 0.05;

/** The bench as squared paper. */
export function Floor() {
  const inks = useInks();
  const geometry = useMemo(() => {
    const lines: number[] = [];
    for (let k = -HALF; k <= HALF + 1e-9; k += CELL)
      lines.push(k, -HALF, 0, k, HALF, 0, -HALF, k, 0, HALF, k, 0);
    const made = new BufferGeometry();
    made.setAttribute('position', new BufferAttribute(new Float32Array(lines), 3));
    return made;
  }, []);
  return (
    <lineSegments geometry={geometry}>
      <lineBasicMaterial color={inks.grid} />
    </lineSegments>
  );
}

const UPRIGHT: [number, number, number] = [Math.PI / 2, 0, 0];

export function Bench({ objects }: { objects: readonly BenchObject[] }) {
  return objects.map((object) => (
    <group key={object.name} position={object.centre} rotation={[0, 0, object.yaw]}>
      <Box size={object.size} />
      {object.kind === 'tray' && <Vials size={object.size} />}
      {object.kind === 'scale' && (
        <group position={[0, 0, object.size[2] / 2 + 0.006]} rotation={UPRIGHT}>
          <Cylinder radius={Math.min(object.size[0], object.size[1]) * 0.36} height={0.012} fill="card" />
        </group>
      )}
    </group>
  ));
}

/** Three rows of four. */
function Vials({ size }: { size: readonly [number, number, number] }) {
  const places: [number, number][] = [];
  for (let row = 0; row < 3; row++)
    for (let column = 0; column < 4; column++)
      places.push([((column + 0.5) / 4 - 0.5) * size[0] * 0.9, ((row + 0.5) / 3 - 0.5) * size[1] * 0.85]);
  return places.map(([x, y]) => (
    <group key={`${x} ${y}`} position={[x, y, size[2] / 2]} rotation={UPRIGHT}>
      <group position={[0, 0.009, 0]}>
        <Cylinder radius={0.008} height={0.018} fill="card" />
      </group>
      <group position={[0, 0.023, 0]}>
        <Cylinder radius={0.009} height={0.01} fill="ink2" />
      </group>
    </group>
  ));
}
