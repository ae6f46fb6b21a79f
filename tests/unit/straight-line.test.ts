import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  compileChain,
  followLine,
  forwardKinematics,
  jacobian,
  rotationAbout,
  rotationVector,
  sampleLine,
} from '../../shared/kinematics';
import { type ArmDescription, modelOf } from '../reference/arm-data';
import pumaFile from '../reference/arm-puma-560.json';
import { anyMovingArm } from '../support/random-arms';

const none = { ixx: 0, iyy: 0, izz: 0, ixy: 0, ixz: 0, iyz: 0 };
const flatArm = (limit: number) =>
  compileChain({
    joints: [0, 0.3].map((x, i) => ({
      name: ['shoulder', 'elbow'][i]!,
      type: 'revolute',
      origin: { xyz: [x, 0, 0], rpy: [0, 0, 0] },
      axis: [0, 0, 1],
      limits: { lower: -limit, upper: limit },
      link: { mass: 1, com: [0, 0, 0], inertia: none },
    })),
    tool: { xyz: [0.3, 0, 0], rpy: [0, 0, 0] },
  });

/** a·bᵀ */
const relative = (a: ArrayLike<number>, b: ArrayLike<number>) =>
  [0, 1, 2, 3, 4, 5, 6, 7, 8].map((k) => {
    const [r, c] = [3 * Math.floor(k / 3), 3 * (k % 3)];
    return a[r]! * b[c]! + a[r + 1]! * b[c + 1]! + a[r + 2]! * b[c + 2]!;
  });

/** A common six-joint arm, away from its limits and singular places. */
const puma = compileChain(modelOf(pumaFile as unknown as ArmDescription));
const bent = [0.4, 0.9, -2.4, 0.5, 0.9, 0.3];

const shortMove = anyMovingArm(6, 7).chain((arm) =>
  fc.record({
    arm: fc.constant(arm),
    way: fc.tuple(...[0, 1, 2].map(() => fc.double({ min: -0.1, max: 0.1, noNaN: true }))),
    axis: fc.constantFrom([0, 0, 1], [1, 0, 0], [0.6, -0.8, 0]),
    angle: fc.double({ min: -1, max: 1, noNaN: true }),
  }),
);

describe('followLine', () => {
  it('stays on the line, turns evenly, keeps the limits and never jumps, or refuses', () => {
    let followed = 0;
    fc.assert(
      fc.property(shortMove, ({ arm: { model, q }, way, axis, angle }) => {
        const chain = compileChain(model);
        const start = forwardKinematics(chain, q);
        const end = start.position.map((value, k) => value + way[k]!);
        const { path } = followLine(chain, q, { position: end, turn: { axis, angle } }, { samples: 100 });
        if (!path) return;
        followed++;
        for (let k = 0; k <= 100; k++) {
          const at = path.q.subarray(k * chain.n, (k + 1) * chain.n);
          const tool = forwardKinematics(chain, at);
          for (let c = 0; c < 3; c++)
            expect(tool.position[c]).toBeCloseTo(start.position[c]! + (k / 100) * way[c]!, 8);
          const turned = rotationVector(relative(tool.rotation, start.rotation));
          for (let c = 0; c < 3; c++) expect(turned[c]).toBeCloseTo((k / 100) * angle * axis[c]!, 7);
          // A jump to another branch would take the interpolated middle far off the line.
          const middle = forwardKinematics(chain, sampleLine(path, (k + 0.5) / 100));
          for (let c = 0; c < 3 && k < 100; c++)
            expect(
              Math.abs(middle.position[c]! - start.position[c]! - ((k + 0.5) / 100) * way[c]!),
            ).toBeLessThan(1e-3);
          at.forEach((value, i) => {
            expect(value).toBeGreaterThanOrEqual(chain.lower[i]!);
            expect(value).toBeLessThanOrEqual(chain.upper[i]!);
          });
          // The tangent moves the tool by the way and the turn, unless a limit holds an arm with joints to spare.
          const j = jacobian(chain, at);
          const tangent = path.tangent.subarray(k * chain.n, (k + 1) * chain.n);
          const free = at.every((value, i) => value > chain.lower[i]! && value < chain.upper[i]!);
          for (let c = 0; c < 3 && free; c++) {
            const speed = tangent.reduce((sum, rate, i) => sum + j[c * chain.n + i]! * rate, 0);
            expect(speed).toBeCloseTo(way[c]!, 4);
          }
        }
      }),
      { seed: 9, numRuns: 60 },
    );
    // Odd arms refuse many lines; enough must have been judged for this test to mean anything.
    expect(followed).toBeGreaterThan(20);
  });

  // Isosceles triangle: on the ray through the base, q2 = 2·acos(d / 0.6) and q1 = −q2/2.
  it('follows the closed form of the planar arm, between the samples too', () => {
    const chain = flatArm(3);
    const at = (d: number) => [-Math.acos(d / 0.6), 2 * Math.acos(d / 0.6)];
    const { path } = followLine(chain, at(0.2), { position: [0.5, 0, 0] });
    expect(path!.length).toBeCloseTo(0.3, 12);
    for (const s of [0, 0.123, 0.5, 0.777, 1]) {
      const q = sampleLine(path!, s);
      at(0.2 + 0.3 * s).forEach((value, i) => {
        expect(q[i]).toBeCloseTo(value, 6);
      });
    }
  });
  it('refuses at the edge of its reach, where the stretched arm is singular', () => {
    const chain = flatArm(3);
    const { refusal } = followLine(chain, [-Math.acos(0.5), 2 * Math.acos(0.5)], { position: [0.8, 0, 0] });
    expect(refusal!.reason).toBe('singularity');
    // 0.3 m of the 0.5 m are inside.
    expect(refusal!.fraction).toBeCloseTo(0.6, 3);
  });
  it('refuses at a limit, naming the joint and the place', () => {
    const chain = flatArm(2);
    // From d = 0.5 inwards the elbow meets 2 rad at d = 0.6·cos(1).
    const { refusal } = followLine(chain, [-Math.acos(5 / 6), 2 * Math.acos(5 / 6)], {
      position: [0.1, 0, 0],
    });
    expect(refusal).toMatchObject({ joint: 1, reason: 'limit' });
    expect(refusal!.fraction).toBeCloseTo((0.5 - 0.6 * Math.cos(1)) / 0.4, 4);
  });
  it('refuses to start outside the limits', () => {
    const { refusal } = followLine(flatArm(1), [0.2, 1.4], { position: [0.4, 0, 0] });
    expect(refusal).toEqual({ joint: 1, fraction: 0, reason: 'limit' });
  });
  it('keeps a direction of the tool where that is asked for', () => {
    const start = forwardKinematics(puma, bent);
    const z = (r: Float64Array) => [r[2]!, r[5]!, r[8]!];
    const { path } = followLine(puma, bent, {
      position: start.position.map((value) => value + 0.01),
      keep: [0, 0, 1],
    });
    const end = forwardKinematics(puma, sampleLine(path!, 1));
    z(end.rotation).forEach((value, k) => {
      expect(value).toBeCloseTo(z(start.rotation)[k]!, 9);
    });
    end.position.forEach((value, k) => {
      expect(value).toBeCloseTo(start.position[k]! + 0.01, 9);
    });
  });
  it('takes the rotation at the end as one turn the short way', () => {
    const start = forwardKinematics(puma, bent);
    const turn = rotationAbout([0, 0.6, 0.8], 0.05);
    const rotation = relative(
      turn,
      [0, 3, 6, 1, 4, 7, 2, 5, 8].map((k) => start.rotation[k]!),
    );
    const { path } = followLine(puma, bent, { position: start.position, rotation });
    expect(path!.angle).toBeCloseTo(0.05, 9);
    const end = forwardKinematics(puma, sampleLine(path!, 1));
    rotation.forEach((value, k) => {
      expect(end.rotation[k]).toBeCloseTo(value, 9);
    });
  });
});
