import { OrbitControls } from '@react-three/drei/core/OrbitControls';
import { useThree } from '@react-three/fiber';
import { useEffect } from 'react';
import { OrthographicCamera } from 'three';
import type { ArmModel } from '../../shared/arm/model';
import type { View } from './views';

/** Where the eye stands, relative to what it looks at. */
const EYES: Record<View, [number, number, number]> = {
  corner: [0.9, -1.25, 0.85],
  side: [0, -1.6, 0.02],
  above: [0.0001, -0.0001, 1.6],
};

/** Height of the arm stretched up: what has to fit the picture, m. */
function reachOf(model: ArmModel): number {
  return model.joints.reduce(
    (sum, joint) => sum + Math.hypot(...joint.origin.xyz),
    Math.hypot(...model.tool.xyz),
  );
}

/** A parallel projection, as on a drawing; drag or the buttons turn it. */
export function CameraRig({ model, view }: { model: ArmModel; view: View }) {
  const { camera, size, invalidate, controls } = useThree();
  useEffect(() => {
    if (!(camera instanceof OrthographicCamera)) return;
    const reach = reachOf(model);
    const [x, y, z] = EYES[view];
    const centre: [number, number, number] =
      view === 'above' ? [reach * 0.22, 0, 0] : [reach * 0.2, 0, reach * 0.34];
    camera.up.set(0, 0, 1);
    camera.position.set(centre[0] + x * 2, centre[1] + y * 2, centre[2] + z * 2);
    camera.zoom = Math.min(size.width / (reach * 1.42), size.height / (reach * 1.12));
    camera.lookAt(...centre);
    camera.updateProjectionMatrix();
    const orbit = controls as unknown as {
      target?: { set(x: number, y: number, z: number): void };
      update?(): void;
    } | null;
    orbit?.target?.set(...centre);
    orbit?.update?.();
    invalidate();
  }, [camera, controls, model, size, view, invalidate]);
  return <OrbitControls makeDefault enablePan={false} enableDamping={false} />;
}
