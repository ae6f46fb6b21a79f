import { useFrame } from '@react-three/fiber';
import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, DoubleSide, Mesh, MeshBasicMaterial } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { compileChain } from '../../../shared/kinematics';
import { useInks } from '../inks';
import { skeleton } from '../sheet/skeleton';
import type { SceneSource } from '../source';
import { halfWidth } from './proportions';

/** Between the squared paper and what is drawn on it, m. */
const ABOVE_PAPER_M = 0.0002;

/** Where the arm stands over the bench: each link's plan as a pale band. It tells height without a figure. */
export function GroundShadow({ model, source }: { model: ArmModel; source: SceneSource }) {
  const inks = useInks();
  const chain = useMemo(() => compileChain(model), [model]);
  const mesh = useMemo(() => {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(new Float32Array(chain.n * 18), 3));
    const made = new Mesh(geometry, new MeshBasicMaterial({ side: DoubleSide }));
    made.frustumCulled = false;
    return made;
  }, [chain]);
  useEffect(() => {
    mesh.material.color.set(inks.shade);
  }, [mesh, inks]);
  useEffect(
    () => () => {
      mesh.geometry.dispose();
      mesh.material.dispose();
    },
    [mesh],
  );
  useFrame(() => {
    const q = source.sample()?.q;
    mesh.visible = q !== undefined && q.length === chain.n;
    if (!q || !mesh.visible) return;
    const points = skeleton(chain, q);
    const position = mesh.geometry.getAttribute('position') as BufferAttribute;
    for (let i = 0; i < chain.n; i++) {
      const [ax, ay] = points[i]!;
      const [bx, by] = points[i + 1]!;
      const length = Math.hypot(bx - ax, by - ay);
      const half = halfWidth(model.joints[i]!.link.shape) * 0.8;
      const nx = length > 1e-6 ? (-(by - ay) / length) * half : 0;
      const ny = length > 1e-6 ? ((bx - ax) / length) * half : 0;
      const corners = [
        [ax + nx, ay + ny],
        [ax - nx, ay - ny],
        [bx - nx, by - ny],
        [ax + nx, ay + ny],
        [bx - nx, by - ny],
        [bx + nx, by + ny],
      ] as const;
      for (const [k, [x, y]] of corners.entries()) position.setXYZ(i * 6 + k, x, y, ABOVE_PAPER_M);
    }
    position.needsUpdate = true;
  });
  return <primitive object={mesh} />;
}
