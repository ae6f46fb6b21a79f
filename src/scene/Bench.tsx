import { useMemo } from 'react';
import { BufferAttribute, BufferGeometry, CylinderGeometry } from 'three';
import { mergeGeometries } from 'three/addons/utils/BufferGeometryUtils.js';
import type { BenchObject } from '../../shared/arm/model';
import { useInks } from './inks';
import { Box, Cylinder, LINE, Outlined } from './Solid';

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

/** Three rows of four, as two drawings and not as twenty-four: a slow machine draws them as often as the arm. */
function Vials({ size }: { size: readonly [number, number, number] }) {
  const [width, depth, height] = size;
  const { bodies, caps } = useMemo(() => {
    const at = (radius: number, tall: number, up: number) => {
      const all = [];
      for (let row = 0; row < 3; row++)
        for (let column = 0; column < 4; column++) {
          const one = new CylinderGeometry(radius, radius, tall, 14).rotateX(Math.PI / 2);
          const x = ((column + 0.5) / 4 - 0.5) * width * 0.9;
          const y = ((row + 0.5) / 3 - 0.5) * depth * 0.85;
          all.push(one.translate(x, y, height / 2 + up));
        }
      return mergeGeometries(all);
    };
    return {
      bodies: { shape: at(0.008, 0.018, 0.009), hull: at(0.008 + LINE, 0.018 + 2 * LINE, 0.009) },
      caps: { shape: at(0.009, 0.01, 0.023), hull: at(0.009 + LINE, 0.01 + 2 * LINE, 0.023) },
    };
  }, [width, depth, height]);
  return (
    <>
      <Outlined {...bodies} fill="card" />
      <Outlined {...caps} fill="ink2" />
    </>
  );
}
