import { useFrame, useThree } from '@react-three/fiber';
import { type PointerEvent, type RefObject, useEffect, useRef } from 'react';
import { type Camera, Plane, Raycaster, Vector2, Vector3 } from 'three';

type Place = [number, number, number];
export interface GhostDrag {
  /** Where the tool point is wanted, m in the base frame; null when there is no ghost. */
  position(): Place | null;
  move(position: Place): void;
}
/** What the handles need of the picture. */
export interface GhostEye {
  camera: Camera | null;
  over: HTMLButtonElement | null;
  up: HTMLButtonElement | null;
}
export const noGhostEye = (): GhostEye => ({ camera: null, over: null, up: null });

/** An arrow key moves the ghost by so much, m. */
const STEP_M = 0.005;
/** The handle for up and down floats so far above the tool point, px. */
const ABOVE_PX = 46;

/** Keeps the handles where the ghost is in the picture. */
export function GhostProbe({ drag, eye }: { drag: GhostDrag; eye: RefObject<GhostEye> }) {
  const camera = useThree((three) => three.camera);
  const probe = useRef(new Vector3());
  useEffect(() => {
    eye.current.camera = camera;
  }, [camera, eye]);
  useFrame(({ size }) => {
    const at = drag.position();
    const { over, up } = eye.current;
    if (!at || !over || !up) return;
    camera.updateMatrixWorld();
    probe.current.set(...at).project(camera);
    const x = ((probe.current.x + 1) / 2) * size.width;
    const y = ((1 - probe.current.y) / 2) * size.height;
    over.style.transform = `translate(${x}px, ${y}px) translate(-50%, -50%)`;
    over.style.visibility = 'visible';
    up.style.visibility = 'visible';
    up.style.transform = `translate(${x}px, ${y - ABOVE_PX}px) translate(-50%, -50%)`;
  });
  return null;
}

/** Two handles over the drawing: over the bench at the same height, and up and down. Arrow keys do the same. */
export function GhostHandles({ drag, eye }: { drag: GhostDrag; eye: RefObject<GhostEye> }) {
  const grab = useRef<{ plane: Plane; offset: Vector3 } | null>(null);
  const hit = (event: PointerEvent<HTMLElement>, plane: Plane): Vector3 | null => {
    const { camera } = eye.current;
    const picture = event.currentTarget.parentElement?.getBoundingClientRect();
    if (!camera || !picture) return null;
    const at = new Vector2(
      ((event.clientX - picture.left) / picture.width) * 2 - 1,
      1 - ((event.clientY - picture.top) / picture.height) * 2,
    );
    const ray = new Raycaster();
    ray.setFromCamera(at, camera);
    return ray.ray.intersectPlane(plane, new Vector3());
  };
  const begin = (upright: boolean) => (event: PointerEvent<HTMLButtonElement>) => {
    const place = drag.position();
    const { camera } = eye.current;
    if (!place || !camera) return;
    const from = new Vector3(...place);
    const facing = camera.getWorldDirection(new Vector3()).setZ(0);
    // Seen from straight above there is no up and down to drag.
    if (upright && facing.length() < 0.05) return;
    const normal = upright ? facing.normalize() : new Vector3(0, 0, 1);
    const plane = new Plane().setFromNormalAndCoplanarPoint(normal, from);
    const start = hit(event, plane);
    if (!start) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    grab.current = { plane, offset: from.sub(start) };
  };
  const go = (upright: boolean) => (event: PointerEvent<HTMLButtonElement>) => {
    const place = drag.position();
    if (!grab.current || !place) return;
    const at = hit(event, grab.current.plane)?.add(grab.current.offset);
    if (at) drag.move(upright ? [place[0], place[1], at.z] : [at.x, at.y, place[2]]);
  };
  const end = () => {
    grab.current = null;
  };
  const step = (key: string, upright: boolean): Place | null => {
    const place = drag.position();
    if (!place) return null;
    const [x, y, z] = place;
    if (upright)
      return key === 'ArrowUp' ? [x, y, z + STEP_M] : key === 'ArrowDown' ? [x, y, z - STEP_M] : null;
    if (key === 'ArrowUp') return [x + STEP_M, y, z];
    if (key === 'ArrowDown') return [x - STEP_M, y, z];
    if (key === 'ArrowLeft') return [x, y + STEP_M, z];
    return key === 'ArrowRight' ? [x, y - STEP_M, z] : null;
  };
  const handle = (upright: boolean) => (
    <button
      type="button"
      className={`ghosthandle ${upright ? 'upright' : ''}`}
      aria-label={
        upright ? 'Ghost up and down: drag, or arrow keys' : 'Ghost over the bench: drag, or arrow keys'
      }
      ref={(element) => {
        eye.current[upright ? 'up' : 'over'] = element;
      }}
      onPointerDown={begin(upright)}
      onPointerMove={go(upright)}
      onPointerUp={end}
      onPointerCancel={end}
      onLostPointerCapture={end}
      onKeyDown={(event) => {
        const to = step(event.key, upright);
        if (!to) return;
        event.preventDefault();
        drag.move(to);
      }}
    >
      <svg viewBox="-12 -12 24 24" aria-hidden="true">
        {upright ? (
          <path d="M0-9V9M0-10l-4 5.500h8ZM0 10l-4-5.500h8Z" />
        ) : (
          <path d="M-9 0H9M0-9V9M-10.500 0l4.500-3v6ZM10.500 0l-4.500-3v6ZM0-10.500l-3 4.500h6ZM0 10.500l-3-4.500h6Z" />
        )}
      </svg>
    </button>
  );
  return (
    <div className="ghosthandles">
      {handle(false)}
      {handle(true)}
    </div>
  );
}
