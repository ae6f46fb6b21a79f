import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { forwardDynamics, gravityTorques, inverseDynamics, massMatrix } from '../../shared/dynamics';
import { type ChainModel, compileChain, linkFrames, type RigidBody } from '../../shared/kinematics';
import { anyBody, anyMovingArm } from '../support/random-arms';

/** Potential energy from the places of the centres of mass alone, J. */
function potential(model: ChainModel, q: number[]): number {
  return linkFrames(compileChain(model), q).reduce((sum, { position, rotation: r }, i) => {
    const { mass, com } = model.joints[i]!.link;
    const at = [0, 1, 2].map(
      (k) => position[k]! + r[3 * k]! * com[0]! + r[3 * k + 1]! * com[1]! + r[3 * k + 2]! * com[2]!,
    );
    return sum - mass * at.reduce((dot, value, k) => dot + value * model.gravity![k]!, 0);
  }, 0);
}

function kinetic(model: ChainModel, q: number[], qd: number[]): number {
  const m = massMatrix(compileChain(model), q);
  return (
    0.5 * qd.reduce((sum, a, i) => sum + qd.reduce((row, b, j) => row + a * m[i * qd.length + j]! * b, 0), 0)
  );
}

describe('gravityTorques', () => {
  it('are the slope of the potential energy', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q }) => {
        const tau = gravityTorques(compileChain(model), q);
        const h = 1e-5;
        q.forEach((_, i) => {
          const at = (t: number) =>
            potential(
              model,
              q.map((value, k) => (k === i ? value + t : value)),
            );
          expect(tau[i]).toBeCloseTo((at(h) - at(-h)) / (2 * h), 6);
        });
      }),
    );
  });
  it('follow the gravity they are given', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q }) => {
        const doubled = gravityTorques(compileChain(model), q, { gravity: model.gravity!.map((g) => 2 * g) });
        const once = gravityTorques(compileChain(model), q);
        for (let i = 0; i < once.length; i++) expect(doubled[i]).toBeCloseTo(2 * once[i]!, 10);
      }),
    );
  });
});

describe('massMatrix', () => {
  it('is symmetric and positive definite', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q, qd }) => {
        const n = q.length;
        const m = massMatrix(compileChain(model), q);
        for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) expect(m[i * n + j]).toBe(m[j * n + i]);
        if (qd.some((speed) => Math.abs(speed) > 1e-3)) expect(kinetic(model, q, qd)).toBeGreaterThan(0);
        expect(smallestPivot(m, n)).toBeGreaterThan(0);
      }),
    );
  });
  it('is what inverse dynamics need per unit of acceleration', () => {
    fc.assert(
      fc.property(anyMovingArm(), anyBody, ({ model, q }, payload) => {
        const chain = compileChain(model);
        const n = chain.n;
        const m = massMatrix(chain, q, undefined, payload);
        const still = new Float64Array(n);
        for (let j = 0; j < n; j++) {
          const one = still.map((_, i) => (i === j ? 1 : 0));
          const column = inverseDynamics(chain, q, still, one, { gravity: [0, 0, 0], payload });
          for (let i = 0; i < n; i++) expect(m[i * n + j]).toBeCloseTo(column[i]!, 10);
        }
      }),
    );
  });
});

/** Smallest diagonal entry of Gaussian elimination: all positive exactly when the matrix is positive definite. */
function smallestPivot(matrix: Float64Array, n: number): number {
  const a = matrix.slice();
  let smallest = Number.POSITIVE_INFINITY;
  for (let k = 0; k < n; k++) {
    smallest = Math.min(smallest, a[k * n + k]!);
    for (let i = k + 1; i < n; i++)
      for (let j = n - 1; j >= k; j--) a[i * n + j]! -= (a[i * n + k]! / a[k * n + k]!) * a[k * n + j]!;
  }
  return smallest;
}

describe('inverseDynamics', () => {
  it('put in as much power as the energy grows by', () => {
    fc.assert(
      fc.property(anyMovingArm(), ({ model, q, qd, qdd }) => {
        const tau = inverseDynamics(compileChain(model), q, qd, qdd);
        const power = qd.reduce((sum, speed, i) => sum + speed * tau[i]!, 0);
        // Energy along q(t) = q + qd·t + qdd·t²/2, by central difference.
        const h = 1e-5;
        const energy = (t: number) => {
          const at = q.map((value, i) => value + qd[i]! * t + (qdd[i]! * t * t) / 2);
          const speed = qd.map((value, i) => value + qdd[i]! * t);
          return kinetic(model, at, speed) + potential(model, at);
        };
        const growth = (energy(h) - energy(-h)) / (2 * h);
        expect(Math.abs(power - growth)).toBeLessThan(1e-5 * Math.max(1, Math.abs(power)));
      }),
    );
  });

  it('see a payload as part of the last link', () => {
    fc.assert(
      fc.property(anyMovingArm(), anyBody, ({ model, q, qd, qdd }, payload) => {
        // The same body as a further link behind a joint that never moves.
        const carried: ChainModel = {
          ...model,
          joints: [
            ...model.joints,
            {
              name: 'held',
              type: 'revolute',
              origin: model.tool,
              axis: [0, 0, 1],
              limits: { lower: 0, upper: 0 },
              link: payload,
            },
          ],
          tool: { xyz: [0, 0, 0], rpy: [0, 0, 0] },
        };
        const withPayload = inverseDynamics(compileChain(model), q, qd, qdd, { payload });
        const asLink = inverseDynamics(compileChain(carried), [...q, 0], [...qd, 0], [...qdd, 0]);
        for (let i = 0; i < q.length; i++) expect(withPayload[i]).toBeCloseTo(asLink[i]!, 9);
      }),
    );
  });
});

describe('forwardDynamics', () => {
  it('undo inverse dynamics', () => {
    fc.assert(
      fc.property(anyMovingArm(), anyBody, ({ model, q, qd, qdd }, payload) => {
        const chain = compileChain(model);
        const found = forwardDynamics(chain, q, qd, inverseDynamics(chain, q, qd, qdd, { payload }), {
          payload,
        });
        for (let i = 0; i < q.length; i++) expect(found[i]).toBeCloseTo(qdd[i]!, 6);
      }),
    );
  });

  it('keep the energy of an arm that swings freely', () => {
    fc.assert(
      fc.property(anyMovingArm(1, 4), ({ model, q, qd }) => {
        const chain = compileChain(model);
        const none = new Float64Array(chain.n);
        const rate = (state: number[]) => {
          const speed = state.slice(chain.n);
          return [...speed, ...forwardDynamics(chain, state.slice(0, chain.n), speed, none)];
        };
        const plus = (a: number[], b: number[], h: number) => a.map((value, i) => value + h * b[i]!);
        const energy = (s: number[]) =>
          kinetic(model, s.slice(0, chain.n), s.slice(chain.n)) + potential(model, s.slice(0, chain.n));
        let state = [...q, ...qd];
        const before = energy(state);
        // Classical Runge–Kutta over 20 ms: its own error is far below the tolerance.
        const h = 2e-4;
        for (let step = 0; step < 100; step++) {
          const k1 = rate(state);
          const k2 = rate(plus(state, k1, h / 2));
          const k3 = rate(plus(state, k2, h / 2));
          const k4 = rate(plus(state, k3, h));
          state = state.map((value, i) => value + (h / 6) * (k1[i]! + 2 * k2[i]! + 2 * k3[i]! + k4[i]!));
        }
        const scale = Math.max(
          1,
          Math.abs(before),
          kinetic(model, state.slice(0, chain.n), state.slice(chain.n)),
        );
        expect(Math.abs(energy(state) - before) / scale).toBeLessThan(1e-6);
      }),
      { numRuns: 30 },
    );
  });

  it('refuse a joint that moves no mass, by name', () => {
    const none: RigidBody = {
      mass: 0,
      com: [0, 0, 0],
      inertia: { ixx: 0, iyy: 0, izz: 0, ixy: 0, ixz: 0, iyz: 0 },
    };
    const model = fc.sample(anyMovingArm(2, 2), { numRuns: 1, seed: 5 })[0]!.model;
    const light: ChainModel = {
      ...model,
      joints: model.joints.map((joint, i) => (i === 1 ? { ...joint, link: none } : joint)),
    };
    expect(() => forwardDynamics(compileChain(light), [0, 0], [0, 0], [0, 0])).toThrow(
      /joint 2 \(joint 2\).*no mass/,
    );
  });
});
