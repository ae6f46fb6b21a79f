import {
  BoxGeometry,
  type BufferGeometry,
  CylinderGeometry,
  ExtrudeGeometry,
  Matrix4,
  Quaternion,
  Shape,
  Vector3,
} from 'three';

/** m, in the frame the solid is drawn in. */
export type Point = readonly [number, number, number];

/**
 * One convex piece of a drawing. Flat-sided pieces get three papers by the way a face looks, as a draughtsman
 * washes a box; round ones stay plain; dark ones are filled with ink.
 */
export interface Solid {
  geometry: BufferGeometry;
  fill: 'flat' | 'round' | 'dark';
}

/** Thin lines on a solid's surface: pairs of points, and how far they are lifted towards the eye, m. */
export interface Marks {
  segments: Point[];
  lift: number;
  kind: 'thin' | 'centre';
}

const Y = new Vector3(0, 1, 0);
const vector = (p: Point) => new Vector3(p[0], p[1], p[2]);
/** Segments around a circle: fine enough to look round at this size, coarse enough for slow machines. */
const AROUND = 28;

/** A cylinder or cone frustum from `from` to `to`. */
export function rod(
  from: Point,
  to: Point,
  radius: number,
  radiusAtEnd = radius,
  fill: Solid['fill'] = 'round',
): Solid {
  const a = vector(from);
  const b = vector(to);
  const geometry = new CylinderGeometry(radiusAtEnd, radius, a.distanceTo(b), AROUND);
  geometry.applyQuaternion(new Quaternion().setFromUnitVectors(Y, b.clone().sub(a).normalize()));
  const middle = a.add(b).multiplyScalar(0.5);
  geometry.translate(middle.x, middle.y, middle.z);
  return { geometry, fill };
}

/** A box with its middle at `centre`, its sides along three directions at right angles. */
export function block(centre: Point, size: Point, along: readonly [Vector3, Vector3, Vector3]): Solid {
  const geometry = new BoxGeometry(size[0], size[1], size[2]);
  geometry.applyMatrix4(new Matrix4().makeBasis(...along).setPosition(...centre));
  return { geometry, fill: 'flat' };
}

/** A box along the frame's own axes. */
export function uprightBlock(centre: Point, size: Point): Solid {
  const geometry = new BoxGeometry(size[0], size[1], size[2]);
  geometry.translate(...centre);
  return { geometry, fill: 'flat' };
}

/**
 * One cheek of a fork: a plate of the given thickness that narrows from its foot to a round head about `head`.
 *
 * @param foot - middle of its lower edge; @param head - centre of the round end
 * @param axis - unit normal of the plate; @param width - of the foot; @param round - radius of the head, all m
 */
export function cheek(
  foot: Point,
  head: Point,
  axis: Vector3,
  width: number,
  round: number,
  thickness: number,
): Solid {
  const up = vector(head).sub(vector(foot));
  const height = up.length();
  up.normalize();
  const side = new Vector3().crossVectors(up, axis);
  // Narrower at the foot than at the head would not be convex.
  const half = Math.max(width / 2, round);
  const plan = new Shape()
    .moveTo(-half, 0)
    .lineTo(half, 0)
    .absarc(0, height, round, 0, Math.PI, false)
    .closePath();
  const geometry = new ExtrudeGeometry(plan, { depth: thickness, bevelEnabled: false, curveSegments: 10 });
  geometry.translate(0, 0, -thickness / 2);
  geometry.applyMatrix4(new Matrix4().makeBasis(side, up, axis).setPosition(...foot));
  return { geometry, fill: 'flat' };
}

/** A circle as segments. */
export function ring(centre: Point, axis: Vector3, radius: number, around = AROUND): Point[] {
  const u = new Vector3(Math.abs(axis.x) < 0.9 ? 1 : 0, Math.abs(axis.x) < 0.9 ? 0 : 1, 0);
  u.addScaledVector(axis, -u.dot(axis)).normalize();
  const v = new Vector3().crossVectors(axis, u);
  const at = (k: number): Point => {
    const angle = (2 * Math.PI * k) / around;
    const c = Math.cos(angle) * radius;
    const s = Math.sin(angle) * radius;
    return [centre[0] + u.x * c + v.x * s, centre[1] + u.y * c + v.y * s, centre[2] + u.z * c + v.z * s];
  };
  return Array.from({ length: around }, (_, k) => [at(k), at(k + 1)]).flat();
}
