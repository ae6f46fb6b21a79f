import type { View } from '../views';

type Vec = readonly [number, number, number];

/** The picture's own directions in the base frame: right, up, and towards the eye; unit vectors. */
export interface Directions {
  right: Vec;
  up: Vec;
  eye: Vec;
}

const degrees = (azimuth: number, height: number): Directions => {
  const a = (azimuth * Math.PI) / 180;
  const h = (height * Math.PI) / 180;
  return {
    right: [-Math.sin(a), Math.cos(a), 0],
    up: [-Math.cos(a) * Math.sin(h), -Math.sin(a) * Math.sin(h), Math.cos(h)],
    eye: [Math.cos(a) * Math.cos(h), Math.sin(a) * Math.cos(h), Math.sin(h)],
  };
};

/** Corner: from the front right, a little above. Side: along the bench. Above: the arm points up the sheet's right. */
export const DIRECTIONS: Record<View, Directions> = {
  corner: degrees(-58, 27),
  side: degrees(-90, 0),
  above: degrees(-90, 89.9),
};

/** Free space kept around what must be seen, CSS px. */
export interface Margins {
  top: number;
  right: number;
  bottom: number;
  left: number;
}

const dot = (a: Vec, b: Vec) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

export interface Framing {
  /** px per metre */
  zoom: number;
  /** What the middle of the picture shows, base frame, m. */
  centre: [number, number, number];
}

/** The largest parallel projection that shows all the points inside the margins. Points in m, sizes in CSS px. */
export function frame(
  points: readonly Vec[],
  { right, up, eye }: Directions,
  width: number,
  height: number,
  margins: Margins,
): Framing {
  const across = points.map((p) => dot(p, right));
  const along = points.map((p) => dot(p, up));
  const depth = points.map((p) => dot(p, eye));
  const [left, far] = [Math.min(...across), Math.max(...across)];
  const [low, high] = [Math.min(...along), Math.max(...along)];
  const roomX = Math.max(40, width - margins.left - margins.right);
  const roomY = Math.max(40, height - margins.top - margins.bottom);
  const zoom = Math.min(roomX / Math.max(0.05, far - left), roomY / Math.max(0.05, high - low));
  const x = (left + far) / 2 + (margins.right - margins.left) / 2 / zoom;
  const y = (low + high) / 2 + (margins.top - margins.bottom) / 2 / zoom;
  const z = (Math.min(...depth) + Math.max(...depth)) / 2;
  const centre = [0, 1, 2].map((k) => right[k]! * x + up[k]! * y + eye[k]! * z);
  return { zoom, centre: centre as [number, number, number] };
}
