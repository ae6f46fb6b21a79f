import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type Chain,
  type ChainModel,
  compileChain,
  forwardKinematics,
  type IkTask,
  listInverseKinematics,
  solveInverseKinematics,
} from '../../shared/kinematics';
import { anyArm, anyPlace } from '../support/random-arms';

const none = { ixx: 0, iyy: 0, izz: 0, ixy: 0, ixz: 0, iyz: 0 };

/** A flat arm in the base's x-y plane with links of the given lengths. */
function flatArm(lengths: number[], limit = 3): Chain {
  return compileChain({
    joints: lengths.map((_, i) => ({
      name: `joint ${i + 1}`,
      type: 'revolute',
      origin: { xyz: [i === 0 ? 0 : lengths[i - 1]!, 0, 0], rpy: [0, 0, 0] },
      axis: [0, 0, 1],
      limits: { lower: -limit, upper: limit },
      link: { mass: 1, com: [0, 0, 0], inertia: none },
    })),
    tool: { xyz: [lengths[lengths.length - 1]!, 0, 0], rpy: [0, 0, 0] },
  });
}

const KINDS = ['pose', 'position', 'axis'] as const;
function taskAt(chain: Chain, q: ArrayLike<number>, kind: (typeof KINDS)[number]): IkTask {
  const { position, rotation } = forwardKinematics(chain, q);
  if (kind === 'pose') return { position, rotation };
  if (kind === 'position') return { position };
  const tool = [0.6, 0, 0.8];
  const base = [0, 3, 6].map(
    (k) => rotation[k]! * tool[0]! + rotation[k + 1]! * tool[1]! + rotation[k + 2]! * tool[2]!,
  );
  return { position, axis: { tool, base } };
}

/** The errors of a configuration, from its pose alone: m, and rad by the chord (angle = 2·asin(chord / 2)). */
function errorsOf(chain: Chain, q: ArrayLike<number>, task: IkTask) {
  const { position, rotation: r } = forwardKinematics(chain, q);
  const off = Math.hypot(...position.map((value, k) => value - task.position[k]!));
  if (task.axis) {
    const { tool, base } = task.axis;
    const points = [0, 3, 6].map((k) => r[k]! * tool[0]! + r[k + 1]! * tool[1]! + r[k + 2]! * tool[2]!);
    return { off, turn: 2 * Math.asin(Math.min(1, Math.hypot(...points.map((v, k) => v - base[k]!)) / 2)) };
  }
  if (!task.rotation) return { off, turn: 0 };
  const chord = Math.hypot(...Array.from(r, (value, k) => value - task.rotation![k]!));
  return { off, turn: 2 * Math.asin(Math.min(1, chord / Math.sqrt(8))) };
}

const anySearch = (fewest: number, most: number) =>
  anyArm(fewest, most).chain((model) =>
    fc.record({
      model: fc.constant(model),
      q: anyPlace(model),
      seed: anyPlace(model),
      kind: fc.constantFrom(...KINDS),
    }),
  );

const inLimits = (model: ChainModel, q: ArrayLike<number>) =>
  model.joints.every(({ limits }, i) => q[i]! >= limits.lower && q[i]! <= limits.upper);

describe('solveInverseKinematics', () => {
  it('finds what forward kinematics came from, for any arm of 4 to 7 joints and any task', () => {
    fc.assert(
      fc.property(anySearch(4, 7), ({ model, q, seed, kind }) => {
        const chain = compileChain(model);
        const task = taskAt(chain, q, kind);
        const found = solveInverseKinematics(chain, task, seed);
        expect(found.converged).toBe(true);
        const { off, turn } = errorsOf(chain, found.q, task);
        expect(off).toBeLessThan(1e-5);
        expect(turn).toBeLessThan(1e-4);
        expect(inLimits(model, found.q)).toBe(true);
      }),
      // Where all solutions hug their limits about one target in 10,000 is missed; these seeds are fixed.
      { numRuns: 150, seed: 20 },
    );
  });

  it('never claims what is not so, wherever the target is', () => {
    const anywhere = anySearch(2, 7).chain((search) =>
      fc.record({
        search: fc.constant(search),
        away: fc.tuple(...[0, 1, 2].map(() => fc.double({ min: -1.5, max: 1.5, noNaN: true }))),
      }),
    );
    fc.assert(
      fc.property(anywhere, ({ search: { model, q, seed, kind }, away }) => {
        const chain = compileChain(model);
        const task = taskAt(chain, q, kind);
        const moved = { ...task, position: Array.from(task.position).map((value, k) => value + away[k]!) };
        const found = solveInverseKinematics(chain, moved, seed, { restarts: 20 });
        const { off, turn } = errorsOf(chain, found.q, moved);
        expect(found.positionError).toBeCloseTo(off, 9);
        expect(found.rotationError).toBeCloseTo(turn, 6);
        expect(inLimits(model, found.q)).toBe(true);
        expect(found.converged).toBe(off <= 1e-6 && found.rotationError <= 1e-5);
        expect(found.reason === undefined).toBe(found.converged);
      }),
    );
  });

  it('answers from beside a known solution with one at least as near, joints to spare or not', () => {
    fc.assert(
      fc.property(anySearch(4, 7), ({ model, q, seed, kind }) => {
        const chain = compileChain(model);
        const beside = q.map((value, i) => value + 0.02 * (seed[i]! - value));
        const found = solveInverseKinematics(chain, taskAt(chain, q, kind), beside);
        const distance = (a: ArrayLike<number>) => Math.hypot(...beside.map((value, i) => value - a[i]!));
        // Metres and radians are mixed here and weighted by the solver: hence not exactly the least.
        expect(distance(found.q)).toBeLessThan(1.1 * distance(q) + 1e-3);
      }),
      { seed: 4, numRuns: 200 },
    );
  });

  it('comes as near to the seed as a planar arm with a joint to spare can (against a scan of its solutions)', () => {
    const [l1, l2, l3] = [0.3, 0.25, 0.2];
    const chain = flatArm([l1, l2, l3], Math.PI);
    const small = fc.double({ min: -0.4, max: 0.4, noNaN: true });
    const bend = fc.double({ min: 0.5, max: 1.5, noNaN: true });
    fc.assert(
      fc.property(small, bend, bend, fc.tuple(small, small, small), (q1, q2, q3, away) => {
        const { position } = forwardKinematics(chain, [q1, q2, q3]);
        const seed = [q1 + away[0], q2 + away[1], q3 + away[2]];
        const distance = (q: ArrayLike<number>) => Math.hypot(...seed.map((value, i) => value - q[i]!));
        let least = Number.POSITIVE_INFINITY;
        for (let first = -1; first < 1; first += 1e-4) {
          // The other two links from where the first ends: law of cosines, elbow one way (the seed's).
          const x = position[0] - l1 * Math.cos(first);
          const y = position[1] - l1 * Math.sin(first);
          const cosine = (x * x + y * y - l2 * l2 - l3 * l3) / (2 * l2 * l3);
          if (Math.abs(cosine) > 1) continue;
          const third = Math.acos(cosine);
          const second = Math.atan2(y, x) - Math.atan2(l3 * Math.sin(third), l2 + l3 * cosine) - first;
          least = Math.min(least, distance([first, second, third]));
        }
        const { converged, q } = solveInverseKinematics(chain, { position }, seed);
        expect(converged).toBe(true);
        expect(distance(q)).toBeLessThan(1.001 * least + 1e-4);
      }),
      { numRuns: 25 },
    );
  });

  // Two links of 0.3 and 0.25 m reach 0.55 m: the nearest place to a target beyond is on the ray to it.
  it('stretches towards a target beyond reach and says how far it stays away', () => {
    const chain = flatArm([0.3, 0.25]);
    for (const angle of [0, 1, -2.2]) {
      const target = [0.8 * Math.cos(angle), 0.8 * Math.sin(angle), 0];
      const found = solveInverseKinematics(chain, { position: target }, [0.4, 0.9]);
      expect(found.converged).toBe(false);
      expect(found.positionError).toBeCloseTo(0.25, 8);
      expect(found.q[0]).toBeCloseTo(angle, 3);
      expect(found.reason).toMatch(/out of reach/);
    }
  });
  it('folds towards a target too near the base', () => {
    const found = solveInverseKinematics(
      flatArm([0.3, 0.2], Math.PI),
      { position: [0.06, 0, 0] },
      [0.4, 0.9],
    );
    expect(found.positionError).toBeCloseTo(0.1 - 0.06, 6);
  });
  it('names the joint whose limit keeps it away', () => {
    const found = solveInverseKinematics(flatArm([0.3], 0.5), { position: [0, 0.3, 0] }, [0]);
    expect(found.q[0]).toBe(0.5);
    // Chord between 0.5 rad and a right angle on a circle of 0.3 m.
    expect(found.positionError).toBeCloseTo(2 * 0.3 * Math.sin((Math.PI / 2 - 0.5) / 2), 12);
    expect(found.reason).toMatch(/joint 1 at a limit/);
  });
  it('chooses the elbow that the seed has', () => {
    const chain = flatArm([0.3, 0.25]);
    const position = forwardKinematics(chain, [0.4, 0.9]).position;
    expect(solveInverseKinematics(chain, { position }, [0.1, 1.4]).q[1]).toBeCloseTo(0.9, 6);
    expect(solveInverseKinematics(chain, { position }, [1.2, -1.4]).q[1]).toBeCloseTo(-0.9, 6);
  });
  it('winds to the turn nearest to the seed where limits leave room', () => {
    const task = { position: [0.3 * Math.cos(1), 0.3 * Math.sin(1), 0] };
    expect(solveInverseKinematics(flatArm([0.3], 8), task, [6.6]).q[0]).toBeCloseTo(1 + 2 * Math.PI, 9);
    expect(solveInverseKinematics(flatArm([0.3], 7), task, [6.6]).q[0]).toBeCloseTo(1, 9);
  });
  it('gives the same answer to the same question', () => {
    fc.assert(
      fc.property(anySearch(6, 7), ({ model, q, seed, kind }) => {
        const task = taskAt(compileChain(model), q, kind);
        const once = solveInverseKinematics(compileChain(model), task, seed);
        const chain = compileChain(model);
        solveInverseKinematics(chain, { position: [1, 2, 3] }, q);
        expect(solveInverseKinematics(chain, task, seed)).toEqual(once);
      }),
      { numRuns: 20 },
    );
  });
  it.each([
    [{ position: [0, Number.NaN, 0] }, /position: NaN/],
    [{ position: [0, 0] }, /position has 2 numbers/],
    [{ position: [0, 0, 0], axis: { tool: [0, 0, 0], base: [0, 0, 1] } }, /axis.tool is the zero vector/],
    [
      {
        position: [0, 0, 0],
        rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1],
        axis: { tool: [0, 0, 1], base: [0, 0, 1] },
      },
      /not both/,
    ],
  ])('refuses the task %j', (task, message) => {
    expect(() => solveInverseKinematics(flatArm([0.3, 0.2]), task, [0, 0])).toThrow(message);
  });
});

describe('listInverseKinematics', () => {
  // Law of cosines: two solutions, elbow ±q2, for every place strictly inside the ring.
  it('lists both elbows of the planar arm, nearest to the seed first', () => {
    const chain = flatArm([0.3, 0.25], Math.PI);
    const position = forwardKinematics(chain, [0.4, 0.9]).position;
    const list = listInverseKinematics(chain, { position }, { seed: [0.4, 0.9] });
    expect(list.map((q) => Math.round(q[1]! * 1e6) / 1e6)).toEqual([0.9, -0.9]);
  });
  it('lists nothing for a place beyond reach', () => {
    expect(listInverseKinematics(flatArm([0.3, 0.25]), { position: [0.6, 0, 0] })).toEqual([]);
  });

  // An arm with axes 2 and 3 parallel and a spherical wrist, whatever its other measures.
  it('lists the configuration that any arm with a spherical wrist came from, and prefers the nearest', () => {
    const measure = fc.double({ min: -0.3, max: 0.3, noNaN: true });
    const slant = fc.double({ min: 0.3, max: 2.8, noNaN: true });
    const angle = fc.double({ min: -3, max: 3, noNaN: true });
    const wristArm = fc.record({
      d: fc.array(measure, { minLength: 12, maxLength: 12 }),
      slants: fc.array(slant, { minLength: 4, maxLength: 4 }),
      turns: fc.array(angle, { minLength: 6, maxLength: 6 }),
      q: fc.array(fc.double({ min: 0.2, max: 2.9, noNaN: true }), { minLength: 6, maxLength: 6 }),
      signs: fc.array(fc.constantFrom(1, -1), { minLength: 6, maxLength: 6 }),
    });
    fc.assert(
      fc.property(wristArm, ({ d, slants, turns, q: sizes, signs }) => {
        const at = (i: number, xyz: number[], tilt: number): ChainModel['joints'][number] => ({
          name: `joint ${i + 1}`,
          type: 'revolute',
          origin: { xyz, rpy: [tilt, 0, turns[i]!] },
          axis: [0, 0, 1],
          limits: { lower: -Math.PI, upper: Math.PI },
          link: { mass: 1, com: [0, 0, 0], inertia: none },
        });
        const chain = compileChain({
          joints: [
            at(0, [d[0]!, d[1]!, d[2]!], 0.3),
            at(1, [d[3]!, d[4]!, d[5]!], slants[0]!),
            at(2, [0.1 + Math.abs(d[6]!), d[7]!, d[8]!], 0),
            at(3, [d[9]!, 0.2, d[10]!], slants[1]!),
            at(4, [0, 0, 0], slants[2]!),
            at(5, [0, 0, 0], slants[3]!),
          ],
          tool: { xyz: [0.02, d[11]!, 0.1], rpy: [0.4, -0.2, 1] },
        });
        const q = sizes.map((value, i) => value * signs[i]!);
        const task = taskAt(chain, q, 'pose');
        const list = listInverseKinematics(chain, task, { seed: q });
        expect(list.length).toBeLessThanOrEqual(8);
        for (const found of list) expect(errorsOf(chain, found, task).off).toBeLessThan(1e-6);
        expect(Math.max(...q.map((value, i) => Math.abs(value - list[0]![i]!)))).toBeLessThan(1e-4);
        const seed = q.map((value) => -value / 2);
        const nearest = (a: ArrayLike<number>) => Math.hypot(...seed.map((value, i) => value - a[i]!));
        const solved = solveInverseKinematics(chain, task, seed);
        expect(nearest(solved.q)).toBeLessThan(Math.min(...list.map(nearest)) + 1e-4);
      }),
      { seed: 6 },
    );
  });
});
