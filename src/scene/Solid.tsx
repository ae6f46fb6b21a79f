import { useMemo } from 'react';
import {
  BackSide,
  BoxGeometry,
  type BufferGeometry,
  CylinderGeometry,
  EdgesGeometry,
  Quaternion,
  Vector3,
} from 'three';
import { useInks } from './inks';

/** Width of the ink outline, m: about the sheet's line at the usual distance. */
export const LINE = 0.0011;

interface Style {
  /** Quiet: drawn in the edge colour, for what is not known. */
  faint?: boolean;
  fill?: 'paper' | 'card' | 'shade' | 'ink2';
}

/** Paper inside, an ink line around its silhouette (a slightly larger copy seen from behind), ink along its edges. */
export function Outlined({
  shape,
  hull,
  faint,
  fill = 'paper',
}: { shape: BufferGeometry; hull: BufferGeometry } & Style) {
  const inks = useInks();
  const edges = useMemo(() => new EdgesGeometry(shape, 40), [shape]);
  const line = faint ? inks.edge : inks.ink;
  return (
    <>
      <mesh geometry={shape}>
        <meshBasicMaterial
          color={inks[fill]}
          transparent={faint}
          opacity={faint ? 0.55 : 1}
          polygonOffset
          polygonOffsetFactor={1}
          polygonOffsetUnits={1}
        />
      </mesh>
      <mesh geometry={hull}>
        <meshBasicMaterial color={line} side={BackSide} />
      </mesh>
      <lineSegments geometry={edges}>
        <lineBasicMaterial color={line} />
      </lineSegments>
    </>
  );
}

export function Box({ size, ...style }: { size: [number, number, number] } & Style) {
  const [x, y, z] = size;
  const shape = useMemo(() => new BoxGeometry(x, y, z), [x, y, z]);
  const hull = useMemo(() => new BoxGeometry(x + 2 * LINE, y + 2 * LINE, z + 2 * LINE), [x, y, z]);
  return <Outlined shape={shape} hull={hull} {...style} />;
}

/** A cylinder along its own y axis. */
export function Cylinder({
  radius,
  height,
  top,
  ...style
}: { radius: number; height: number; top?: number } & Style) {
  const upper = top ?? radius;
  const shape = useMemo(() => new CylinderGeometry(upper, radius, height, 20), [upper, radius, height]);
  const hull = useMemo(
    () => new CylinderGeometry(upper + LINE, radius + LINE, height + 2 * LINE, 20),
    [upper, radius, height],
  );
  return <Outlined shape={shape} hull={hull} {...style} />;
}

const UP = new Vector3(0, 1, 0);

/** Its children stand along y; this lays them from `from` to `to` (m) with the middle in between. */
export function Along({
  from,
  to,
  children,
}: {
  from: readonly number[];
  to: readonly number[];
  children: (length: number) => React.ReactNode;
}) {
  const a = new Vector3(from[0], from[1], from[2]);
  const b = new Vector3(to[0], to[1], to[2]);
  const length = a.distanceTo(b);
  if (length < 1e-6) return null;
  const turn = new Quaternion().setFromUnitVectors(UP, b.clone().sub(a).normalize());
  return (
    <group position={a.add(b).multiplyScalar(0.5)} quaternion={turn}>
      {children(length)}
    </group>
  );
}
