import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { availableTorque } from '../../shared/arm/drives';
import type { ArmModel } from '../../shared/arm/model';
import { degToRad } from '../../shared/arm/units';
import { compileChain, linkFrames } from '../../shared/kinematics';
import { readPoseFile } from '../../src/features/poses/FileMenu';
import { findPoses, tagsInUse } from '../../src/features/poses/find-poses';
import { tagsOf } from '../../src/features/poses/LabelDialog';
import { cardNote, poseFacts, timeToGo } from '../../src/features/poses/pose-facts';
import { farthest } from '../../src/features/poses/RevisionsDialog';

const { heron, dipper } = DEMO_ARMS;
const degrees = (...values: number[]) => values.map(degToRad);
const GRAVITY = 9.80665;

/** Potential energy of all links, J: the slow way to gravity torques, which are its slope. */
function energy(model: ArmModel, q: readonly number[]): number {
  const frames = linkFrames(compileChain(model), q);
  return model.joints.reduce((sum, joint, i) => {
    const { position, rotation: R } = frames[i]!;
    const [x, y, z] = joint.link.com;
    return sum + joint.link.mass * GRAVITY * (position[2] + R[6]! * x + R[7]! * y + R[8]! * z);
  }, 0);
}

const poseIn = (model: ArmModel) =>
  fc.tuple(
    ...model.joints.map(({ limits }) => fc.double({ min: limits.lower, max: limits.upper, noNaN: true })),
  );

describe('what the arm says about a pose', () => {
  it('names the joint with the largest share of torque: the slope of the potential energy over what the drive has', () => {
    for (const model of [heron, dipper])
      fc.assert(
        fc.property(poseIn(model), (q) => {
          const h = 1e-6;
          const shares = model.joints.map((joint, i) => {
            const at = (step: number) =>
              energy(
                model,
                q.map((v, k) => (k === i ? v + step : v)),
              );
            return Math.abs((at(h) - at(-h)) / (2 * h)) / availableTorque(joint.drive, 0);
          });
          // Fingers wide open carry nothing.
          const { torque } = poseFacts(model, { q, gripper: 1 });
          expect(torque!.used).toBeCloseTo(Math.max(...shares), 5);
        }),
      );
  });

  it('counts the payload once the fingers are closed on it', () => {
    const q = degrees(0, 20, -30, 0);
    const open = poseFacts(heron, { q, gripper: 1 }).torque!.used;
    const closed = poseFacts(heron, { q, gripper: 0.36 }).torque!.used;
    expect(closed).toBeGreaterThan(open);
  });

  it('finds the nearest limit and every joint beyond one', () => {
    // Heron: upper arm 8° to 114°, forearm −132° to −20°.
    const near = poseFacts(heron, { q: degrees(0, 60, -22.5, -40), gripper: null });
    expect(near.nearest).toMatchObject({ joint: 2, side: 'upper' });
    expect(near.nearest!.margin).toBeCloseTo(degToRad(2.5), 12);
    expect(near.beyond).toEqual([]);
    expect(poseFacts(heron, { q: degrees(130, 60, -140, -40), gripper: null }).beyond).toEqual([0, 2]);
  });

  it('says of a pose with other joints only that it does not fit', () => {
    const facts = poseFacts(heron, { q: [0, 0], gripper: null });
    expect(facts).toEqual({ fits: false, beyond: [], nearest: null, torque: null, freedom: null });
  });

  it('puts what is wrong on the card before what a person wrote', () => {
    const pose = { note: 'Camera sees all', trust: 'declared', origin: 'captured' } as const;
    const noteAt = (...q: number[]) =>
      cardNote(heron, pose, poseFacts(heron, { q: degrees(...q), gripper: 1 }));
    expect(noteAt(0, 60, -140, -40)).toEqual({ text: 'Forearm is past its limit', warns: true });
    expect(noteAt(0, 60, -22.5, -40)).toEqual({ text: 'Forearm 2.5° from its unfold limit', warns: true });
    expect(noteAt(0, 60, -80, -40)).toEqual({
      text: 'Position was only declared when captured',
      warns: true,
    });
    const sure = { ...pose, trust: 'referenced' } as const;
    expect(cardNote(heron, sure, poseFacts(heron, { q: degrees(0, 60, -80, -40), gripper: 1 }))).toEqual({
      text: 'Camera sees all',
      warns: false,
    });
  });
});

describe('the time to go to a pose', () => {
  // Biagiotti & Melchiorri, Trajectory Planning (2008), §3.4.1: with v_max below a_max²/j_max the acceleration
  // phase is two jerks of √(v/j) each, so T = D/v + 2·√(v/j). Heron's base: 70°/s, 1200°/s³; at 2 % 1.4°/s.
  it('is the double-S time of the one joint that moves', () => {
    const from = degrees(-50, 60, -80, -40);
    const to = degrees(50, 60, -80, -40);
    const v = 0.02 * 70;
    expect(timeToGo(heron, from, to, 0.02)).toBeCloseTo(100 / v + 2 * Math.sqrt(v / 1200), 6);
  });

  it('is nothing where the arm already is, and the same there and back', () => {
    fc.assert(
      fc.property(poseIn(heron), poseIn(heron), (a, b) => {
        expect(timeToGo(heron, a, a, 0.25)).toBe(0);
        const there = timeToGo(heron, a, b, 0.25);
        expect(Math.abs(timeToGo(heron, b, a, 0.25) - there)).toBeLessThan(1e-6 * Math.max(1, there));
      }),
      { numRuns: 30 },
    );
  });
});

describe('finding poses', () => {
  const pose = (name: string, tags: string[], note = '', by = 'Ines') => ({ name, tags, note, by }) as never;
  const poses = [
    pose('Above tray', ['tray']),
    pose('On scale', ['scale', 'tray'], 'Mind the cable'),
    pose('Oil', ['service'], '', 'Moss'),
  ];
  const names = (text: string, tag: string | null = null) =>
    findPoses(poses, text, tag).map((found) => found.name);

  it('looks for every word in name, note, tags and person', () => {
    expect(names('SCALE cable')).toEqual(['On scale']);
    expect(names('moss')).toEqual(['Oil']);
    expect(names('tray')).toEqual(['Above tray', 'On scale']);
    expect(names('tray', 'scale')).toEqual(['On scale']);
    expect(names('nothing like it')).toEqual([]);
  });

  it('offers tags by how much they are used', () => {
    expect(tagsInUse(poses)).toEqual(['tray', 'scale', 'service']);
  });

  it('reads typed tags once each', () => {
    expect(tagsOf(' tray, pick ,,tray,')).toEqual(['tray', 'pick']);
  });
});

describe('a file of poses', () => {
  const file = {
    format: 'elbowroom-poses',
    version: 1,
    arm: 'Heron',
    units: { revolute: 'rad', prismatic: 'm' },
    joints: ['Base turn'],
    poses: [{ name: 'Rest', tags: [], note: '', q: [0.1], gripper: null }],
  };
  it('is read when it is one', () => {
    expect(readPoseFile(JSON.stringify(file), 'a.json')).toEqual(file);
  });
  it('is refused in words otherwise', () => {
    expect(readPoseFile('{', 'a.json')).toMatch(/^a\.json is not JSON/);
    expect(readPoseFile(JSON.stringify({ ...file, version: 2 }), 'a.json')).toMatch(/version/);
    expect(readPoseFile(JSON.stringify({ ...file, poses: [{ name: 'x' }] }), 'a.json')).toMatch(/poses\.0/);
  });
});

describe('a revision beside today’s pose', () => {
  it('is told by the joint that differs most of its range', () => {
    const today = { q: degrees(0, 60, -80, -40) };
    expect(farthest(heron, { q: degrees(10, 45, -80, -40) }, today)).toBe('Upper arm −15.0°');
    expect(farthest(heron, today, today)).toBe('the same place');
  });
});
