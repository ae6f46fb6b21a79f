import { useFrame } from '@react-three/fiber';
import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, Line, LineDashedMaterial, Points, PointsMaterial } from 'three';
import type { ArmModel } from '../../shared/arm/model';
import { compileChain, forwardKinematics, linkFrames } from '../../shared/kinematics';
import { useInks } from './inks';
import type { SceneSource } from './source';

/** Ten seconds at ten dots a second. */
const DOTS = 100;
const DOT_EVERY_S = 0.1;

/** The arm as a chain of thin lines at other joint values: the target in blue, or where it really is. */
export function ChainLine({
  model,
  source,
  pick,
  color,
}: {
  model: ArmModel;
  source: SceneSource;
  pick: 'target' | 'truth';
  color: string;
}) {
  const chain = useMemo(() => compileChain(model), [model]);
  const line = useMemo(() => {
    const geometry = new BufferGeometry();
    geometry.setAttribute(
      'position',
      new BufferAttribute(new Float32Array((model.joints.length + 2) * 3), 3),
    );
    const made = new Line(
      geometry,
      new LineDashedMaterial({ dashSize: 0.014, gapSize: 0.008, depthTest: false }),
    );
    made.frustumCulled = false;
    made.renderOrder = 5;
    return made;
  }, [model]);
  useEffect(() => {
    line.material.color.set(color);
  }, [line, color]);
  useEffect(
    () => () => {
      line.geometry.dispose();
      line.material.dispose();
    },
    [line],
  );
  useFrame(() => {
    const q = source.sample()?.[pick];
    line.visible = q !== undefined && q.length === model.joints.length;
    if (!line.visible || !q) return;
    const positions = line.geometry.getAttribute('position') as BufferAttribute;
    positions.setXYZ(0, 0, 0, 0);
    for (const [i, frame] of linkFrames(chain, q).entries()) positions.setXYZ(i + 1, ...frame.position);
    positions.setXYZ(model.joints.length + 1, ...forwardKinematics(chain, q).position);
    positions.needsUpdate = true;
    line.computeLineDistances();
  });
  return <primitive object={line} />;
}

/** Where the tool point has been in the last ten seconds, dotted. */
export function ToolTrace({ source }: { source: SceneSource }) {
  const inks = useInks();
  const points = useMemo(() => {
    const geometry = new BufferGeometry();
    geometry.setAttribute('position', new BufferAttribute(new Float32Array(DOTS * 3), 3));
    geometry.setDrawRange(0, 0);
    const made = new Points(geometry, new PointsMaterial({ size: 3, sizeAttenuation: false }));
    made.frustumCulled = false;
    return made;
  }, []);
  useEffect(() => {
    points.material.color.set(inks.ink);
  }, [points, inks]);
  useEffect(
    () => () => {
      points.geometry.dispose();
      points.material.dispose();
    },
    [points],
  );
  useFrame(() => {
    const sample = source.sample();
    const state = points.userData as { t?: number; next?: number; count?: number };
    if (!sample || (state.t !== undefined && sample.t - state.t < DOT_EVERY_S && sample.t >= state.t)) return;
    state.t = sample.t;
    const next = state.next ?? 0;
    const positions = points.geometry.getAttribute('position') as BufferAttribute;
    positions.setXYZ(next, ...sample.tool.position);
    positions.needsUpdate = true;
    state.next = (next + 1) % DOTS;
    state.count = Math.min(DOTS, (state.count ?? 0) + 1);
    points.geometry.setDrawRange(0, state.count);
  });
  return <primitive object={points} />;
}
