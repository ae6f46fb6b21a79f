import { describe, expect, it } from 'vitest';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { availableTorque, reflectedInertia } from '../../shared/arm/drives';
import { ArmModel } from '../../shared/arm/model';
import { inverseDynamics } from '../../shared/dynamics';
import { compileChain, seededRandom, solveInverseKinematics } from '../../shared/kinematics';
import { jointPath, pathLimits, planPosition, sampleProfile } from '../../shared/motion';
import { worstGravityTorques } from '../../shared/sums';

const arms = Object.values(DEMO_ARMS).map((model) => [model.name, model] as const);

describe.each(arms)('%s', (_, model) => {
  const chain = compileChain(model);
  const payload = model.payload ?? undefined;

  it('is a model that passes its own schema, unchanged', () => {
    expect(ArmModel.parse(model)).toEqual(model);
  });

  it('is made of real bodies: masses positive, no moment of inertia above the sum of the other two', () => {
    for (const { link } of model.joints) {
      const { ixx, iyy, izz } = link.inertia;
      expect(link.mass).toBeGreaterThan(0);
      expect(Math.max(ixx, iyy, izz)).toBeLessThanOrEqual((ixx + iyy + izz) / 2 + 1e-12);
    }
  });

  it('never runs out of torque, loaded, whatever move it makes at full ramps', () => {
    const random = seededRandom(11);
    const anywhere = () =>
      model.joints.map(({ limits }) => limits.lower + random() * (limits.upper - limits.lower));
    for (let k = 0; k < 150; k++) {
      const path = jointPath(chain, anywhere(), anywhere());
      const limits = pathLimits(chain, path, { fraction: 1, pointSpeed: Infinity });
      const profile = planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits);
      for (let t = 0; t < profile.duration; t += 0.02) {
        const s = sampleProfile(profile, t);
        const q = path.from.map((x, i) => x + path.direction[i]! * s.position);
        const qd = path.direction.map((d) => d * s.velocity);
        const qdd = path.direction.map((d) => d * s.acceleration);
        const tau = inverseDynamics(chain, q, qd, qdd, { payload });
        for (const [i, { drive }] of model.joints.entries()) {
          const asked = Math.abs(tau[i]! + reflectedInertia(drive) * qdd[i]!);
          expect(asked / availableTorque(drive, qd[i]!)).toBeLessThan(1);
        }
      }
    }
  });

  it('reaches the middle and the corners above everything on its bench', () => {
    const seed = model.joints.map(({ limits }) => (limits.lower + limits.upper) / 2);
    for (const { centre, size, yaw } of model.bench)
      for (const [x, y] of [
        [0, 0],
        [1, 1],
        [1, -1],
        [-1, 1],
        [-1, -1],
      ] as const) {
        const dx = x * 0.4 * size[0];
        const dy = y * 0.4 * size[1];
        const position: [number, number, number] = [
          centre[0] + Math.cos(yaw) * dx - Math.sin(yaw) * dy,
          centre[1] + Math.sin(yaw) * dx + Math.cos(yaw) * dy,
          centre[2] + size[2] / 2 + 0.03,
        ];
        expect(solveInverseKinematics(chain, { position }, seed).converged).toBe(true);
      }
  });

  it('speaks of its motions in words, never in signs', () => {
    for (const { words } of model.joints)
      for (const word of [words.positive, words.negative, words.positiveDoing, words.negativeDoing])
        expect(word).toMatch(/^[a-z][a-z ]+$/);
  });
});

describe('Heron', () => {
  const { heron } = DEMO_ARMS;

  it('uses 60 to 80 % of its upper arm’s torque to hold itself out, loaded: there is something to show', () => {
    const worst = worstGravityTorques(compileChain(heron), { payload: heron.payload! })[1]!.torque;
    const used = worst / availableTorque(heron.joints[1]!.drive, 0);
    expect(used).toBeGreaterThan(0.6);
    expect(used).toBeLessThan(0.8);
  });

  it('can keep a vial upright over its tray and its scale', () => {
    const chain = compileChain(heron);
    const seed = heron.joints.map(({ limits }) => (limits.lower + limits.upper) / 2);
    for (const { centre, size } of heron.bench) {
      const position: [number, number, number] = [centre[0], centre[1], centre[2] + size[2] / 2 + 0.03];
      const axis = {
        tool: [1, 0, 0] as [number, number, number],
        base: [0, 0, -1] as [number, number, number],
      };
      expect(solveInverseKinematics(chain, { position, axis }, seed).converged).toBe(true);
    }
  });

  it('has the joints, motors and limits that the demo tells of', () => {
    expect(heron.joints.map(({ name }) => name)).toEqual(['Base turn', 'Upper arm', 'Forearm', 'Wrist tilt']);
    expect(heron.joints.map(({ drive }) => drive.kind)).toEqual(['stepper', 'stepper', 'stepper', 'servo']);
    expect(heron.gripper?.opening).toBe(0.038);
  });
});
