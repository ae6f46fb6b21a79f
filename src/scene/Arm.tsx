import { useFrame } from '@react-three/fiber';
import { useMemo, useRef } from 'react';
import { Euler, type Group, Quaternion, Vector3 } from 'three';
import type { ArmModel, Joint, LinkShape } from '../../shared/arm/model';
import { Along, Box, Cylinder } from './Solid';
import { Sweep } from './Sweep';
import type { SceneSource } from './source';

/** Half the width of a link's section, m. */
function halfWidth(shape: LinkShape): number {
  if (shape.kind === 'tube') return shape.outer / 2;
  if (shape.kind === 'bar') return shape.diameter / 2;
  return Math.max(shape.width, shape.height) / 2;
}

/** The arm as its model describes it: every joint turns or slides the rest of the tree. */
export function Arm({ model, source, known }: { model: ArmModel; source: SceneSource; known: boolean }) {
  const movers = useRef<(Group | null)[]>([]);
  const fingers = useRef<(Group | null)[]>([]);
  const axes = useMemo(() => model.joints.map((joint) => new Vector3(...joint.axis).normalize()), [model]);

  useFrame(() => {
    const sample = source.sample();
    if (!sample) return;
    for (const [i, joint] of model.joints.entries()) {
      const group = movers.current[i];
      const q = sample.q[i];
      const axis = axes[i];
      if (!group || q === undefined || !axis) continue;
      if (joint.type === 'revolute') group.quaternion.setFromAxisAngle(axis, q);
      else group.position.copy(axis).multiplyScalar(q);
    }
    const opening = model.gripper?.opening ?? 0;
    const half = ((sample.gripper ?? 1) * opening) / 2;
    for (const [side, finger] of fingers.current.entries())
      if (finger) finger.position.y = (side === 0 ? 1 : -1) * (half + 0.004);
  });

  const build = (i: number): React.ReactNode => {
    const joint = model.joints[i];
    if (!joint) return <Tool model={model} fingers={fingers} faint={!known} />;
    const { xyz, rpy } = joint.origin;
    return (
      <group
        position={xyz}
        quaternion={new Quaternion().setFromEuler(new Euler(rpy[0], rpy[1], rpy[2], 'ZYX'))}
      >
        <Sweep joint={joint} index={i} source={source} />
        <group
          ref={(group) => {
            movers.current[i] = group;
          }}
        >
          <LinkBody joint={joint} faint={!known && i > 0} first={i === 0} />
          {build(i + 1)}
        </group>
      </group>
    );
  };

  const foot = model.joints[0]?.origin.xyz ?? [0, 0, 0.1];
  return (
    <>
      <group rotation={[Math.PI / 2, 0, 0]} position={[0, 0, 0.006]}>
        <Cylinder radius={0.085} height={0.012} />
      </group>
      <Along from={[0, 0, 0.012]} to={[foot[0], foot[1], Math.max(foot[2], 0.03)]}>
        {(length) => <Cylinder radius={0.06} top={0.05} height={length} />}
      </Along>
      {build(0)}
    </>
  );
}

function LinkBody({ joint, faint, first }: { joint: Joint; faint: boolean; first: boolean }) {
  const { shape, end } = joint.link;
  const half = halfWidth(shape);
  const length = Math.hypot(...end);
  const axis = joint.axis;
  const hub = Math.max(0.017, half * 1.35);
  const cross = new Vector3(...axis).normalize();
  const along = length > 0 ? Math.abs(cross.dot(new Vector3(...end).normalize())) : 0;
  return (
    <>
      <Along from={[0, 0, 0]} to={end}>
        {(l) =>
          shape.kind === 'box' ? (
            <Box size={[shape.width, l, shape.height]} faint={faint} />
          ) : (
            <Cylinder radius={half} height={l} faint={faint} />
          )
        }
      </Along>
      {/* A hub across the joint, where the link does not run along the axis. */}
      {joint.type === 'revolute' && along < 0.7 && (
        <Along
          from={cross
            .clone()
            .multiplyScalar(-hub * 1.15)
            .toArray()}
          to={cross
            .clone()
            .multiplyScalar(hub * 1.15)
            .toArray()}
        >
          {(l) => (
            <>
              <Cylinder radius={hub} height={l} fill="card" faint={faint} />
              <Cylinder radius={hub * 0.45} height={l + 0.004} fill="shade" faint={faint} />
            </>
          )}
        </Along>
      )}
      {first && along > 0.7 && (
        <Along from={[0, 0, -0.012]} to={[0, 0, 0.012]}>
          {(l) => <Cylinder radius={0.055} height={l} fill="card" />}
        </Along>
      )}
    </>
  );
}

/** The last stretch to the tool point, and two fingers where there is a gripper. */
function Tool({
  model,
  fingers,
  faint,
}: {
  model: ArmModel;
  fingers: React.RefObject<(Group | null)[]>;
  faint: boolean;
}) {
  const last = model.joints.at(-1)?.link.end ?? [0, 0, 0];
  const { xyz, rpy } = model.tool;
  const way = new Vector3(xyz[0] - last[0], xyz[1] - last[1], xyz[2] - last[2]);
  if (!model.gripper)
    return (
      <Along from={last} to={xyz}>
        {(l) => <Cylinder radius={0.005} height={l} faint={faint} />}
      </Along>
    );
  const length = Math.max(0.02, way.length());
  const turn = new Quaternion().setFromUnitVectors(
    new Vector3(1, 0, 0),
    way.lengthSq() > 0 ? way.normalize() : new Vector3(1, 0, 0),
  );
  return (
    <group
      position={xyz}
      quaternion={new Quaternion().setFromEuler(new Euler(rpy[0], rpy[1], rpy[2], 'ZYX')).multiply(turn)}
    >
      <group position={[-length * 0.85, 0, 0]}>
        <Box size={[0.012, model.gripper.opening + 0.026, 0.016]} fill="card" faint={faint} />
      </group>
      {[0, 1].map((side) => (
        <group
          key={side}
          ref={(group) => {
            fingers.current[side] = group;
          }}
        >
          <group position={[-length * 0.4 + 0.004, 0, 0]}>
            <Box size={[length * 0.9, 0.006, 0.012]} fill="card" faint={faint} />
          </group>
        </group>
      ))}
    </group>
  );
}
