import { OrbitControls } from '@react-three/drei/core/OrbitControls';
import { useFrame, useThree } from '@react-three/fiber';
import { type ComponentRef, useEffect, useMemo, useRef } from 'react';
import { OrthographicCamera, Vector3 } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { compileChain } from '../../../shared/kinematics';
import { useInkMaterials } from '../ink/ink-context';
import { scaleMaterials } from '../ink/materials';
import type { SceneSource } from '../source';
import type { View } from '../views';
import { DIRECTIONS, frame, type Margins } from './framing';
import { flesh, skeleton, standingPoints } from './skeleton';

type Vec = readonly [number, number, number];
const EYE_DISTANCE_M = 6;
const MARGINS: Margins = { top: 40, right: 34, bottom: 22, left: 26 };
const TIGHT: Margins = { top: 12, right: 12, bottom: 10, left: 12 };
/** Below this height, px, the picture has no room for wide margins. */
const TIGHT_BELOW_PX = 260;

/**
 * A parallel projection, as on a drawing. It stands still while the arm moves, and steps back only when the arm
 * would leave the sheet. A drag turns it; after that it is the person's (`onTurned`).
 */
export function CameraRig({
  model,
  view,
  source,
  onTurned,
}: {
  model: ArmModel;
  view: View | null;
  source: SceneSource;
  onTurned: () => void;
}) {
  const { camera, size, invalidate } = useThree();
  const materials = useInkMaterials();
  const controls = useRef<ComponentRef<typeof OrbitControls>>(null);
  const dragging = useRef(false);
  const chain = useMemo(() => compileChain(model), [model]);
  const around = useMemo(() => flesh(model), [model]);
  const shown = useRef({ view: null as View | null, points: [] as Vec[], hadSample: false });
  const probe = useMemo(() => new Vector3(), []);

  const armPoints = () => {
    const sample = source.sample();
    const postures = [sample?.q, sample?.target].filter(
      (q) => q?.length === chain.n,
    ) as (readonly number[])[];
    return postures
      .flatMap((q) => skeleton(chain, q))
      .flatMap(([x, y, z]): Vec[] =>
        [-around, around].flatMap((d): Vec[] => [
          [x + d, y, z],
          [x, y + d, z],
          [x, y, z + d],
        ]),
      );
  };
  const aim = (at: View, points: readonly Vec[]) => {
    if (!(camera instanceof OrthographicCamera)) return;
    const directions = DIRECTIONS[at];
    const margins = size.height < TIGHT_BELOW_PX ? TIGHT : MARGINS;
    const { zoom, centre } = frame(points, directions, size.width, size.height, margins);
    const { eye } = directions;
    camera.up.set(0, 0, 1);
    camera.zoom = zoom;
    camera.position.set(
      centre[0] + eye[0] * EYE_DISTANCE_M,
      centre[1] + eye[1] * EYE_DISTANCE_M,
      centre[2] + eye[2] * EYE_DISTANCE_M,
    );
    camera.lookAt(...centre);
    camera.updateProjectionMatrix();
    controls.current?.target.set(...centre);
    controls.current?.update();
    invalidate();
  };
  const begin = (at: View) => {
    const arm = armPoints();
    shown.current = { view: at, points: [...standingPoints(model), ...arm], hadSample: arm.length > 0 };
    aim(at, shown.current.points);
  };
  // biome-ignore lint/correctness/useExhaustiveDependencies: aims anew for another view, arm or size, nothing else
  useEffect(() => {
    if (view) begin(view);
    else shown.current.view = null;
  }, [camera, model, size, view]);

  useFrame(({ gl }) => {
    const { view: at, hadSample } = shown.current;
    if (at) {
      const arm = armPoints();
      if (arm.length > 0 && !hadSample) begin(at);
      else if (arm.some((point) => isOutside(probe.set(...point).project(camera)))) {
        shown.current.points.push(...arm);
        aim(at, shown.current.points);
      }
    }
    scaleMaterials(materials, camera.zoom, size.width, size.height, gl.getPixelRatio());
  });
  return (
    <OrbitControls
      ref={controls}
      enablePan={false}
      enableDamping={false}
      onStart={() => {
        dragging.current = true;
      }}
      onEnd={() => {
        dragging.current = false;
      }}
      onChange={() => {
        if (!dragging.current || !shown.current.view) return;
        shown.current.view = null;
        onTurned();
      }}
    />
  );
}

/** A little before the very edge, so that the outline is not cut. */
const isOutside = (p: Vector3) => Math.abs(p.x) > 0.985 || Math.abs(p.y) > 0.985;
