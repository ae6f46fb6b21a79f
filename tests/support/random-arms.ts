import fc from 'fast-check';
import type { ChainJoint, ChainModel, RigidBody } from '../../shared/kinematics';

/** Arms nobody would build: odd axes, skewed frames, sliding joints anywhere, lopsided bodies. For property tests. */
const within = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });
const three = (min: number, max: number) => fc.tuple(within(min, max), within(min, max), within(min, max));

/** A body that can exist: its principal moments come from three spreads of mass, so the triangle inequality holds. */
export const anyBody: fc.Arbitrary<RigidBody> = fc
  .record({ mass: within(0.05, 3), com: three(-0.15, 0.15), spread: three(0.01, 0.08), tilt: three(-3, 3) })
  .map(({ mass, com, spread, tilt }) => ({ mass, com, inertia: tiltedInertia(mass, spread, tilt) }));

function tiltedInertia(mass: number, spread: number[], tilt: number[]): RigidBody['inertia'] {
  // Second moments of mass S = Σ m·s²·u·uᵀ along three directions at right angles; inertia = tr(S)·1 − S.
  const [a, b] = tilt as [number, number];
  const u = [Math.cos(a) * Math.cos(b), Math.sin(a) * Math.cos(b), Math.sin(b)];
  const v = [-Math.sin(a), Math.cos(a), 0];
  const w = [-Math.cos(a) * Math.sin(b), -Math.sin(a) * Math.sin(b), Math.cos(b)];
  const s = (i: number, j: number) =>
    [u, v, w].reduce((sum, axis, k) => sum + mass * spread[k]! ** 2 * axis[i]! * axis[j]!, 0);
  const trace = s(0, 0) + s(1, 1) + s(2, 2);
  return {
    ixx: trace - s(0, 0),
    iyy: trace - s(1, 1),
    izz: trace - s(2, 2),
    ixy: -s(0, 1),
    ixz: -s(0, 2),
    iyz: -s(1, 2),
  };
}

const anyAxis = fc.oneof(
  fc.constantFrom([0, 0, 1], [0, -1, 0], [1, 0, 0]),
  three(-1, 1).filter((axis) => Math.hypot(...axis) > 0.2),
);

const anyJoint = (index: number): fc.Arbitrary<ChainJoint> =>
  fc
    .record({
      sliding: fc.boolean().chain((first) => (first ? fc.boolean() : fc.constant(false))),
      xyz: three(-0.25, 0.25),
      rpy: three(-3, 3),
      axis: anyAxis,
      down: within(0.4, 3),
      up: within(0.4, 3),
      body: anyBody,
    })
    .map(({ sliding, xyz, rpy, axis, down, up, body }) => ({
      name: `joint ${index + 1}`,
      type: sliding ? 'prismatic' : 'revolute',
      origin: { xyz, rpy },
      axis,
      limits: sliding ? { lower: -0.1 * down, upper: 0.1 * up } : { lower: -down, upper: up },
      link: body,
    }));

export const anyArm = (fewest = 1, most = 7): fc.Arbitrary<ChainModel> =>
  fc.integer({ min: fewest, max: most }).chain((n) =>
    fc.record({
      joints: fc.tuple(...Array.from({ length: n }, (_, index) => anyJoint(index))),
      tool: fc.record({ xyz: three(-0.1, 0.15), rpy: three(-3, 3) }),
      gravity: fc.constantFrom<[number, number, number]>([0, 0, -9.80665], [1.2, -3, -8]),
    }),
  );

/** An arm with a place inside its limits, and speeds and accelerations. */
export const anyMovingArm = (fewest?: number, most?: number) =>
  anyArm(fewest, most).chain((model) =>
    fc.record({
      model: fc.constant(model),
      q: anyPlace(model),
      qd: fc.array(within(-2, 2), { minLength: model.joints.length, maxLength: model.joints.length }),
      qdd: fc.array(within(-5, 5), { minLength: model.joints.length, maxLength: model.joints.length }),
    }),
  );

export const anyPlace = (model: ChainModel): fc.Arbitrary<number[]> =>
  fc.array(within(0, 1), { minLength: model.joints.length, maxLength: model.joints.length }).map((shares) =>
    shares.map((share, i) => {
      const { lower, upper } = model.joints[i]!.limits;
      return lower + share * (upper - lower);
    }),
  );
