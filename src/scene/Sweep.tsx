import { useFrame } from '@react-three/fiber';
import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, Color, DoubleSide, Mesh, MeshBasicMaterial, Vector3 } from 'three';
import type { Joint } from '../../shared/arm/model';
import { useInks } from './inks';
import type { SceneSource } from './source';

const SEGMENTS = 16;
/** Shorter than this nothing is drawn, rad or m. */
const LEAST = 0.004;

/** The stopping shadow in 3D: the striped sector (or strip) that the link would still sweep if let go now. */
export function Sweep({ joint, index, source }: { joint: Joint; index: number; source: SceneSource }) {
  const inks = useInks();
  const mesh = useMemo(() => {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(new Float32Array(SEGMENTS * 18), 3));
    geometry.setAttribute('color', new BufferAttribute(new Float32Array(SEGMENTS * 18), 3));
    const material = new MeshBasicMaterial({ vertexColors: true, side: DoubleSide });
    const made = new Mesh(geometry, material);
    made.frustumCulled = false;
    made.visible = false;
    return made;
  }, []);
  useEffect(
    () => () => {
      mesh.geometry.dispose();
      mesh.material.dispose();
    },
    [mesh],
  );
  useEffect(() => {
    const colors = mesh.geometry.getAttribute('color') as BufferAttribute;
    const two = [new Color(inks.move), new Color(inks.move2)];
    for (let k = 0; k < SEGMENTS; k++)
      for (let v = 0; v < 6; v++) {
        const c = two[k % 2]!;
        colors.setXYZ(k * 6 + v, c.r, c.g, c.b);
      }
    colors.needsUpdate = true;
  }, [mesh, inks]);

  const axis = useMemo(() => new Vector3(...joint.axis).normalize(), [joint]);
  const arm = useMemo(() => {
    const end = new Vector3(...joint.link.end);
    // A link along its own axis sweeps nothing that can be seen: show it a little to the side.
    const across = end.clone().addScaledVector(axis, -end.dot(axis));
    if (across.length() > 0.02) return end;
    return Math.abs(axis.z) > 0.7 ? new Vector3(0.14, 0, 0) : new Vector3(0, 0, 0.1);
  }, [joint, axis]);

  useFrame(() => {
    const sample = source.sample();
    const q = sample?.q[index];
    const rest = sample?.stopAt[index];
    mesh.visible = q !== undefined && rest !== undefined && Math.abs(rest - q) > LEAST;
    if (!mesh.visible || q === undefined || rest === undefined) return;
    const positions = mesh.geometry.getAttribute('position') as BufferAttribute;
    const at = (share: number, radius: number) => {
      const value = q + (rest - q) * share;
      return joint.type === 'revolute'
        ? arm.clone().multiplyScalar(radius).applyAxisAngle(axis, value)
        : new Vector3(radius * 0.04, 0, 0).addScaledVector(axis, value);
    };
    for (let k = 0; k < SEGMENTS; k++) {
      const corners = [
        at(k / SEGMENTS, 0.3),
        at(k / SEGMENTS, 0.95),
        at((k + 1) / SEGMENTS, 0.95),
        at((k + 1) / SEGMENTS, 0.3),
      ];
      for (const [v, corner] of [0, 1, 2, 0, 2, 3].entries()) {
        const p = corners[corner]!;
        positions.setXYZ(k * 6 + v, p.x, p.y, p.z);
      }
    }
    positions.needsUpdate = true;
  });
  return <primitive object={mesh} />;
}
