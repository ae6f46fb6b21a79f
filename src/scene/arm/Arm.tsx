import { useFrame } from '@react-three/fiber';
import { useEffect, useMemo } from 'react';
import { Group } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { Drawn } from '../ink/Drawn';
import { draw } from '../ink/drawing';
import type { SceneSource } from '../source';
import { basePieces } from './base-solids';
import { fingerPieces, palmPieces, toolPlan } from './gripper-solids';
import { linkPieces, type Pieces } from './link-solids';
import { placeJoint, placeOrigin } from './place-joint';
import { Sweep } from './Sweep';

const drawPieces = ({ solids, marks }: Pieces) => draw(solids, marks);

/** The arm as its model describes it: every joint turns or slides the rest of the chain. */
export function Arm({ model, source, known }: { model: ArmModel; source: SceneSource; known: boolean }) {
  const base = useMemo(() => drawPieces(basePieces(model)), [model]);
  return (
    <>
      <Drawn drawing={base} />
      <FromJoint model={model} index={0} source={source} unknown={!known} />
    </>
  );
}

interface Props {
  model: ArmModel;
  index: number;
  source: SceneSource;
  unknown: boolean;
}

function FromJoint({ model, index, source, unknown }: Props) {
  const joint = model.joints[index]!;
  const isLast = index === model.joints.length - 1;
  const drawing = useMemo(() => drawPieces(linkPieces(model, index)), [model, index]);
  const [frame, mover] = useMemo(() => [new Group(), new Group()] as const, []);
  useEffect(() => placeOrigin(frame, joint.origin), [frame, joint]);
  useFrame(() => {
    const value = source.sample()?.q[index];
    if (value === undefined) return;
    // A joint that was sliding before the builder changed it must not keep its old place.
    if (joint.type === 'revolute') mover.position.set(0, 0, 0);
    else mover.quaternion.identity();
    placeJoint(mover, joint, value);
  });
  return (
    <primitive object={frame}>
      <Sweep model={model} index={index} source={source} />
      <primitive object={mover}>
        <Drawn drawing={drawing} unknown={unknown} />
        {isLast ? (
          <Tool model={model} source={source} unknown={unknown} />
        ) : (
          <FromJoint model={model} index={index + 1} source={source} unknown={unknown} />
        )}
      </primitive>
    </primitive>
  );
}

/** The palm and two fingers that open by metres, or a pointed tool. */
function Tool({ model, source, unknown }: Omit<Props, 'index'>) {
  const palm = useMemo(() => drawPieces(palmPieces(model)), [model]);
  return (
    <>
      <Drawn drawing={palm} unknown={unknown} />
      {model.gripper && (
        <>
          <Finger model={model} side={1} source={source} unknown={unknown} />
          <Finger model={model} side={-1} source={source} unknown={unknown} />
        </>
      )}
    </>
  );
}

function Finger({ model, side, source, unknown }: Omit<Props, 'index'> & { side: 1 | -1 }) {
  const drawing = useMemo(() => drawPieces(fingerPieces(model, side)), [model, side]);
  const apart = useMemo(() => toolPlan(model).apart, [model]);
  const group = useMemo(() => new Group(), []);
  useFrame(() => {
    const opening = (source.sample()?.gripper ?? 1) * (model.gripper?.opening ?? 0);
    group.position.copy(apart).multiplyScalar((side * opening) / 2);
  });
  return (
    <primitive object={group}>
      <Drawn drawing={drawing} unknown={unknown} />
    </primitive>
  );
}
