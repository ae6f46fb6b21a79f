import { MATERIALS } from './materials';
import type { LinkShape, MassProperties, Vec3 } from './model';

/**
 * Mass, centre and inertia of a straight link from the origin of its frame to `end` (m), from its section
 * and material: a hollow or solid cylinder, or a box. kg, kg·m², about the centre of mass, in the link frame.
 *
 * @see Shigley, Mechanical Engineering Design, mass moments of inertia: tube about its axis m(ro²+ri²)/2,
 *   across m(3(ro²+ri²)+L²)/12; box about an axis m(b²+c²)/12
 * @throws RangeError if the link has no length, or the tube is thicker inside than outside
 */
export function massProperties(shape: LinkShape, end: Vec3): MassProperties {
  const length = Math.hypot(...end);
  if (!(length > 0)) throw new RangeError('the link has no length');
  const axis = end.map((x) => x / length) as Vec3;
  const { density } = MATERIALS[shape.material];
  let mass: number;
  let along: number;
  let across: number;
  if (shape.kind === 'box') {
    const { width, height } = shape;
    mass = density * width * height * length;
    along = (mass * (width ** 2 + height ** 2)) / 12;
    // The section's two sides differ a little; their mean serves for a link that may lie in any direction.
    across = (mass * ((width ** 2 + height ** 2) / 2 + length ** 2)) / 12;
  } else {
    const outer = (shape.kind === 'tube' ? shape.outer : shape.diameter) / 2;
    const inner = shape.kind === 'tube' ? shape.inner / 2 : 0;
    if (!(outer > inner)) throw new RangeError('the tube is at least as wide inside as outside');
    mass = density * Math.PI * (outer ** 2 - inner ** 2) * length;
    along = (mass * (outer ** 2 + inner ** 2)) / 2;
    across = (mass * (3 * (outer ** 2 + inner ** 2) + length ** 2)) / 12;
  }
  // I = across·1 + (along − across)·a·aᵀ for a body of revolution about a.
  const entry = (r: number, c: number) => (along - across) * axis[r]! * axis[c]! + (r === c ? across : 0);
  return {
    mass,
    com: end.map((x) => x / 2) as Vec3,
    inertia: {
      ixx: entry(0, 0),
      iyy: entry(1, 1),
      izz: entry(2, 2),
      ixy: entry(0, 1),
      ixz: entry(0, 2),
      iyz: entry(1, 2),
    },
  };
}

/** Adds a point mass (a motor, a gripper) to a body; kg and m in the same frame. Parallel-axis theorem. */
export function withPointMass(body: MassProperties, mass: number, at: Vec3): MassProperties {
  const total = body.mass + mass;
  if (!(total > 0)) return body;
  const d = at.map((x, k) => x - body.com[k]!) as Vec3;
  const reduced = (body.mass * mass) / total;
  const dd = d[0] ** 2 + d[1] ** 2 + d[2] ** 2;
  const { ixx, iyy, izz, ixy, ixz, iyz } = body.inertia;
  return {
    mass: total,
    com: body.com.map((x, k) => x + (mass / total) * d[k]!) as Vec3,
    inertia: {
      ixx: ixx + reduced * (dd - d[0] * d[0]),
      iyy: iyy + reduced * (dd - d[1] * d[1]),
      izz: izz + reduced * (dd - d[2] * d[2]),
      ixy: ixy - reduced * d[0] * d[1],
      ixz: ixz - reduced * d[0] * d[2],
      iyz: iyz - reduced * d[1] * d[2],
    },
  };
}
