import { describe, expect, it } from 'vitest';
import { forwardDynamics, gravityTorques, inverseDynamics, massMatrix } from '../../shared/dynamics';
import { compileChain, dexterity, forwardKinematics, jacobian } from '../../shared/kinematics';
import { type ArmFile, bodyOf, modelOf } from './arm-data';
import planar from './arm-planar-2.json';
import puma from './arm-puma-560.json';
import pumaPayload from './arm-puma-560-payload.json';
import scara from './arm-scara-4.json';

const TOLERANCE = 1e-9;

/** 1e-9 absolute, relative above 1. */
function expectClose(actual: ArrayLike<number>, expected: ArrayLike<number>, what: string): void {
  expect(actual.length, what).toBe(expected.length);
  for (let i = 0; i < expected.length; i++) {
    const off = Math.abs(actual[i]! - expected[i]!) / Math.max(1, Math.abs(expected[i]!));
    expect(off, `${what}[${i}] ${actual[i]} for ${expected[i]}`).toBeLessThanOrEqual(TOLERANCE);
  }
}

// Source of arm-*.json: see README.md in this folder.
for (const [name, file] of Object.entries({ planar, puma, pumaPayload, scara } as Record<string, unknown>)) {
  const reference = file as ArmFile;
  const chain = compileChain(modelOf(reference));
  const payload = reference.arm.payload ? bodyOf(reference.arm.payload) : null;

  describe(`${name}, ${reference.configurations.length} configurations`, () => {
    it('puts the tool where the independent library puts it', () => {
      for (const c of reference.configurations) {
        const { position, rotation } = forwardKinematics(chain, c.q);
        expectClose(position, c.p, 'position');
        expectClose(rotation, c.R.flat(), 'rotation');
      }
    });
    it('has its Jacobian', () => {
      for (const c of reference.configurations) expectClose(jacobian(chain, c.q), c.J.flat(), 'J');
    });
    it('has its singular values and their products', () => {
      for (const c of reference.configurations) {
        const found = dexterity(chain, c.q);
        expectClose(found.singularValues, c.sigma, 'sigma');
        expectClose([found.manipulability], [c.manip], 'manip');
        expectClose([found.translationManipulability], [c.manip_translation], 'manip_translation');
      }
    });
    it('needs its torques to hold still and to move', () => {
      for (const c of reference.configurations) {
        expectClose(gravityTorques(chain, c.q, { payload }), c.gravity_tau, 'gravity');
        expectClose(inverseDynamics(chain, c.q, c.qd, c.qdd, { payload }), c.tau, 'tau');
      }
    });
    it('has its mass matrix, and forward dynamics undo inverse dynamics', () => {
      for (const c of reference.configurations) {
        if (c.M) expectClose(massMatrix(chain, c.q, undefined, payload), c.M.flat(), 'M');
        const qdd = forwardDynamics(chain, c.q, c.qd, c.tau, { payload });
        for (let i = 0; i < qdd.length; i++) expect(qdd[i]).toBeCloseTo(c.qdd[i]!, 6);
      }
    });
  });
}

// Spong, Hutchinson & Vidyasagar, Robot Modeling and Control, two-link arm in a vertical plane.
describe('the planar arm in closed form', () => {
  const chain = compileChain(modelOf(planar as unknown as ArmFile));
  const [l1, l2, a1, a2, m1, m2, I1, I2, g] = [0.3, 0.25, 0.15, 0.12, 0.5, 0.35, 0.004, 0.002, 9.80665];
  const cases = [
    { q: [0.3, -1.1], qd: [0.7, -0.4], qdd: [1.5, 2.5] },
    { q: [-2.1, 0.6], qd: [-1.3, 2.2], qdd: [-0.2, 0.9] },
  ];
  for (const { q, qd, qdd } of cases) {
    const [q1, q2] = q as [number, number];
    const [d1, d2] = qd as [number, number];
    const [e1, e2] = qdd as [number, number];
    const c2 = Math.cos(q2);
    it(`stands and moves as the textbook says at q = ${q.join(', ')}`, () => {
      const { position } = forwardKinematics(chain, q);
      expect(position[0]).toBeCloseTo(l1 * Math.cos(q1) + l2 * Math.cos(q1 + q2), 12);
      expect(position[2]).toBeCloseTo(l1 * Math.sin(q1) + l2 * Math.sin(q1 + q2), 12);
      const M11 = m1 * a1 ** 2 + m2 * (l1 ** 2 + a2 ** 2 + 2 * l1 * a2 * c2) + I1 + I2;
      const M12 = m2 * (a2 ** 2 + l1 * a2 * c2) + I2;
      const M22 = m2 * a2 ** 2 + I2;
      const h = -m2 * l1 * a2 * Math.sin(q2);
      const G2 = m2 * a2 * g * Math.cos(q1 + q2);
      const G1 = (m1 * a1 + m2 * l1) * g * Math.cos(q1) + G2;
      const tau = inverseDynamics(chain, q, qd, qdd);
      expect(tau[0]).toBeCloseTo(M11 * e1 + M12 * e2 + h * (2 * d1 * d2 + d2 ** 2) + G1, 11);
      expect(tau[1]).toBeCloseTo(M12 * e1 + M22 * e2 - h * d1 ** 2 + G2, 11);
      const M = massMatrix(chain, q);
      for (const [k, value] of [M11, M12, M12, M22].entries()) expect(M[k]).toBeCloseTo(value, 12);
      const { translationManipulability } = dexterity(chain, q);
      expect(translationManipulability).toBeCloseTo(l1 * l2 * Math.abs(Math.sin(q2)), 12);
    });
  }
});

// P. Corke, Robotics, Vision and Control: gravity load and pose of the PUMA 560 at its named configurations,
// g = 9.81 m/s², as printed to four digits. The book counts the torque the joints must bear with the same sign.
describe('the PUMA 560 at the named configurations of the textbook', () => {
  const chain = compileChain(modelOf(puma as unknown as ArmFile));
  const quarter = Math.PI / 2;
  it.each([
    ['nominal', [0, Math.PI / 4, Math.PI, 0, Math.PI / 4, 0], [0, 31.6399, 6.0351, 0, 0.0283, 0]],
    ['zero', [0, 0, 0, 0, 0, 0], [0, 37.4837, 0.2489, 0, 0, 0]],
    ['ready', [0, quarter, -quarter, 0, 0, 0], [0, -0.7752, 0.2489, 0, 0, 0]],
    ['stretched', [0, 0, -quarter, 0, 0, 0], [0, 46.0069, 8.7722, 0, 0.0283, 0]],
  ])('bears the printed torques (%s)', (_, q, printed) => {
    const tau = gravityTorques(chain, q, { gravity: [0, 0, -9.81] });
    for (const [i, value] of printed.entries())
      expect(Math.abs(tau[i]! - value)).toBeLessThanOrEqual(0.5001e-4);
  });
  it('has its tool where it is printed (nominal)', () => {
    const { position } = forwardKinematics(chain, [0, Math.PI / 4, Math.PI, 0, Math.PI / 4, 0]);
    for (const [k, value] of [0.5963, -0.1501, -0.0144].entries())
      expect(Math.abs(position[k]! - value)).toBeLessThanOrEqual(0.5001e-4);
  });
});
