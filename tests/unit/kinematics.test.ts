import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type ChainModel,
  compileChain,
  dexterity,
  emptyTransform,
  fastestPointSpeed,
  forwardKinematics,
  jacobian,
  linkFrames,
  radiusAboutJoint,
  rotationAbout,
  rotationFromRpy,
  rotationVector,
  singularValuesOf,
  worstReach,
} from '../../shared/kinematics';
import { anyMovingArm, anyPlace } from '../support/random-arms';

const STEP = 1e-6;
const shift = (q: number[], qd: number[], t: number) => q.map((value, i) => value + t * qd[i]!);

/** Where the modelled points are, from the link frames and the model alone. */
function pointsOf(model: ChainModel, q: number[]): number[][] {
  return linkFrames(compileChain(model), q).flatMap(({ position, rotation: r }, i) => {
    const next = model.joints[i + 1]?.origin.xyz ?? model.tool.xyz;
    const places = [[0, 0, 0], next, ...(model.joints[i]!.link.end ? [model.joints[i]!.link.end] : [])];
    return places.map((p) =>
      [0, 1, 2].map((k) => position[k]! + r[3 * k]! * p[0]! + r[3 * k + 1]! * p[1]! + r[3 * k + 2]! * p[2]!),
    );
  });
}

/** A joint of a flat arm, its axis upright, x metres out from the one before. */
const flatJoint = (x: number) => ({
  name: `at ${x}`,
  type: 'revolute' as const,
  origin: { xyz: [x, 0, 0.2], rpy: [0, 0, 0] },
  axis: [0, 0, 1],
  limits: { lower: -1, upper: 1 },
  link: { mass: 1, com: [0, 0, 0], inertia: { ixx: 0, iyy: 0, izz: 0, ixy: 0, ixz: 0, iyz: 0 } },
});

describe('forwardKinematics', () => {
  // Written out as the definition says: T = Trans(xyz)·R(rpy)·Motion(q) joint by joint, then the tool.
  it('is the product of the joint transforms of the model', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q }) => {
        let position = [0, 0, 0];
        let rotation = [1, 0, 0, 0, 1, 0, 0, 0, 1];
        const times = (a: ArrayLike<number>, b: ArrayLike<number>) =>
          [0, 1, 2, 3, 4, 5, 6, 7, 8].map((k) => {
            const [r, c] = [3 * Math.floor(k / 3), k % 3];
            return a[r]! * b[c]! + a[r + 1]! * b[c + 3]! + a[r + 2]! * b[c + 6]!;
          });
        const go = (v: readonly number[]) => {
          position = position.map(
            (p, k) =>
              p + rotation[3 * k]! * v[0]! + rotation[3 * k + 1]! * v[1]! + rotation[3 * k + 2]! * v[2]!,
          );
        };
        const turn = (rpy: readonly number[]) => {
          for (const [axis, k] of [
            [[0, 0, 1], 2],
            [[0, 1, 0], 1],
            [[1, 0, 0], 0],
          ] as const)
            rotation = times(rotation, rotationAbout(axis, rpy[k]!));
        };
        model.joints.forEach((joint, i) => {
          go(joint.origin.xyz);
          turn(joint.origin.rpy);
          const length = Math.hypot(...joint.axis);
          const axis = joint.axis.map((value) => value / length);
          if (joint.type === 'prismatic') go(axis.map((value) => value * q[i]!));
          else rotation = times(rotation, rotationAbout(axis, q[i]!));
        });
        go(model.tool.xyz);
        turn(model.tool.rpy);
        const tool = forwardKinematics(compileChain(model), q);
        for (let k = 0; k < 3; k++) expect(tool.position[k]).toBeCloseTo(position[k]!, 12);
        for (let k = 0; k < 9; k++) expect(tool.rotation[k]).toBeCloseTo(rotation[k]!, 12);
      }),
    );
  });

  it('fills what it is given', () => {
    const model = fc.sample(anyMovingArm(4, 4), { numRuns: 1, seed: 1 })[0]!;
    const out = emptyTransform();
    expect(forwardKinematics(compileChain(model.model), model.q, out)).toBe(out);
    expect(out).toEqual(forwardKinematics(compileChain(model.model), model.q));
  });
});

describe('jacobian', () => {
  it('is the slope of the pose (central differences)', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q }) => {
        const chain = compileChain(model);
        const j = jacobian(chain, q);
        q.forEach((_, i) => {
          const one = q.map((__, k) => (k === i ? 1 : 0));
          const ahead = forwardKinematics(chain, shift(q, one, STEP));
          const behind = forwardKinematics(chain, shift(q, one, -STEP));
          const turned = rotationVector(relative(ahead.rotation, behind.rotation));
          for (let k = 0; k < 3; k++) {
            const speed = (ahead.position[k]! - behind.position[k]!) / (2 * STEP);
            expect(j[k * chain.n + i]).toBeCloseTo(speed, 8);
            expect(j[(3 + k) * chain.n + i]).toBeCloseTo(turned[k]! / (2 * STEP), 8);
          }
        });
      }),
    );
  });
});

/** a·bᵀ */
const relative = (a: ArrayLike<number>, b: ArrayLike<number>) =>
  [0, 1, 2, 3, 4, 5, 6, 7, 8].map((k) => {
    const [r, c] = [3 * Math.floor(k / 3), 3 * (k % 3)];
    return a[r]! * b[c]! + a[r + 1]! * b[c + 1]! + a[r + 2]! * b[c + 2]!;
  });

describe('the modelled points', () => {
  it('are nowhere faster than fastestPointSpeed says, and somewhere that fast (central differences)', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q, qd }) => {
        const ahead = pointsOf(model, shift(q, qd, STEP));
        const behind = pointsOf(model, shift(q, qd, -STEP));
        const speeds = ahead.map((p, k) => Math.hypot(...p.map((v, c) => v - behind[k]![c]!)) / (2 * STEP));
        expect(fastestPointSpeed(compileChain(model), q, qd)).toBeCloseTo(Math.max(...speeds), 6);
      }),
    );
  });

  it('go as fast as their radius when one joint turns alone', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q }) => {
        const chain = compileChain(model);
        q.forEach((_, joint) => {
          const alone = q.map((__, k) => (k === joint ? 1 : 0));
          expect(radiusAboutJoint(chain, q, joint)).toBeCloseTo(fastestPointSpeed(chain, q, alone), 12);
        });
      }),
    );
  });

  it('are never farther from an axis than worstReach', () => {
    fc.assert(
      fc.property(
        anyMovingArm().chain(({ model }) =>
          fc.record({
            model: fc.constant(model),
            places: fc.array(anyPlace(model), { minLength: 5, maxLength: 20 }),
          }),
        ),
        ({ model, places }) => {
          const chain = compileChain(model);
          const bound = worstReach(chain);
          for (const q of places)
            for (let joint = 0; joint < chain.n; joint++)
              // Axes within 1e-7 rad count as parallel: over a few metres that is less than this.
              expect(radiusAboutJoint(chain, q, joint)).toBeLessThanOrEqual(bound[joint]! + 1e-6);
        },
      ),
    );
  });

  it('reach exactly the sum of the links of a stretched planar arm, whatever hangs along the axis', () => {
    const chain = compileChain({
      joints: [flatJoint(0), flatJoint(0.3)],
      tool: { xyz: [0.25, 0, -0.4], rpy: [0, 0, 0] },
    });
    expect(worstReach(chain)[0]).toBeCloseTo(0.55, 12);
    expect(worstReach(chain)[1]).toBeCloseTo(0.25, 12);
  });
});

describe('rotations', () => {
  const anyVector = fc.tuple(
    ...([0, 1, 2] as const).map(() => fc.double({ min: -1, max: 1, noNaN: true })),
  ) as fc.Arbitrary<[number, number, number]>;

  it('are found again from their rotation vector, tiny ones and half turns too', () => {
    const anyAngle = fc.oneof(
      fc.double({ min: 0, max: Math.PI, noNaN: true }),
      fc.constantFrom(1e-9, 1e-5, Math.PI - 1e-5, Math.PI - 1e-9, Math.PI),
    );
    fc.assert(
      fc.property(
        anyVector.filter((v) => Math.hypot(...v) > 0.1),
        anyAngle,
        (v, angle) => {
          const length = Math.hypot(...v);
          const r = rotationAbout(
            v.map((value) => value / length),
            angle,
          );
          const found = rotationVector(r);
          const size = Math.hypot(found[0]!, found[1]!, found[2]!);
          expect(size).toBeCloseTo(angle, 7);
          if (size === 0) return;
          const again = rotationAbout(
            Array.from(found, (value) => value / size),
            size,
          );
          for (let k = 0; k < 9; k++) expect(again[k]).toBeCloseTo(r[k]!, 10);
        },
      ),
    );
  });

  // Siciliano et al., Robotics, eq. (2.21): the entries of Rz(y)·Ry(p)·Rx(r).
  it('take roll, pitch and yaw about fixed axes in that order', () => {
    const [r, p, y] = [0.3, -0.7, 1.9];
    const R = rotationFromRpy([r, p, y]);
    expect(R[0]).toBeCloseTo(Math.cos(y) * Math.cos(p), 15);
    expect(R[1]).toBeCloseTo(Math.cos(y) * Math.sin(p) * Math.sin(r) - Math.sin(y) * Math.cos(r), 15);
    expect(R[6]).toBeCloseTo(-Math.sin(p), 15);
    expect(R[7]).toBeCloseTo(Math.cos(p) * Math.sin(r), 15);
  });
});

describe('singular values', () => {
  it('have the squares of the entries as their own sum of squares, and the determinant as their product', () => {
    const entries = fc.array(fc.double({ min: -2, max: 2, noNaN: true }), { minLength: 9, maxLength: 9 });
    fc.assert(
      fc.property(entries, (m) => {
        const s = singularValuesOf(m, 3, 3);
        const det =
          m[0]! * (m[4]! * m[8]! - m[5]! * m[7]!) -
          m[1]! * (m[3]! * m[8]! - m[5]! * m[6]!) +
          m[2]! * (m[3]! * m[7]! - m[4]! * m[6]!);
        expect(s[0]! ** 2 + s[1]! ** 2 + s[2]! ** 2).toBeCloseTo(
          m.reduce((sum, x) => sum + x * x, 0),
          10,
        );
        expect(s[0]! * s[1]! * s[2]!).toBeCloseTo(Math.abs(det), 10);
      }),
    );
  });

  // Spong, Hutchinson & Vidyasagar: the planar arm's |det J| = l1·l2·|sin q2|, singular when stretched.
  it('show the stretched planar arm as singular, and the bent one not', () => {
    const chain = compileChain({
      joints: [flatJoint(0), flatJoint(0.3)],
      tool: { xyz: [0.25, 0, 0], rpy: [0, 0, 0] },
    });
    expect(dexterity(chain, [0.7, 0]).translationIsotropy).toBeLessThan(1e-12);
    expect(dexterity(chain, [0.7, 0]).translationManipulability).toBeLessThan(1e-12);
    expect(dexterity(chain, [0.7, 1.2]).translationManipulability).toBeCloseTo(
      0.3 * 0.25 * Math.sin(1.2),
      12,
    );
  });
});

describe('compileChain', () => {
  const model = fc.sample(anyMovingArm(3, 3), { numRuns: 1, seed: 2 })[0]!.model;
  const changed = (change: object): ChainModel => ({
    ...model,
    joints: model.joints.map((joint, i) => (i === 1 ? { ...joint, ...change } : joint)),
  });

  it.each([
    ['a zero axis', { axis: [0, 0, 0] }, /joint 2 .*axis/],
    ['an axis of two numbers', { axis: [0, 1] }, /joint 2 .*axis.*expected 3/],
    ['crossed limits', { limits: { lower: 1, upper: -1 } }, /joint 2 .*limit/],
    [
      'an origin that is not a number',
      { origin: { xyz: [0, Number.NaN, 0], rpy: [0, 0, 0] } },
      /joint 2 .*origin/,
    ],
    ['an unknown kind of joint', { type: 'planar' }, /joint 2 .*type/],
  ])('refuses %s, naming the joint', (_, change, message) => {
    expect(() => compileChain(changed(change))).toThrow(message);
  });
  it('refuses an arm without joints', () => {
    expect(() => compileChain({ ...model, joints: [] })).toThrow(/at least one joint/);
  });
  it('refuses a configuration with too few values', () => {
    expect(() => forwardKinematics(compileChain(model), [0, 0])).toThrow(
      /q has 2 values, the arm has 3 joints/,
    );
  });
});
