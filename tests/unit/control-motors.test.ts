import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { deg, jog, juno, MIDDLE, middleRig, moss, press, readyRig } from '../support/ready-arm';
import { Rig } from '../support/rig';

function controlled(): Rig {
  const rig = new Rig(heron);
  rig.send(juno, { type: 'control.take' });
  return rig;
}

function energise(rig: Rig, servo: number | null, joints?: number[]) {
  return rig.send(juno, {
    type: 'motors.energise',
    turn: rig.state.turn,
    joints,
    servoAngles: servo === null ? [] : [{ joint: 3, q: servo }],
    cautionsRead: true,
  });
}

describe('energising', () => {
  it('powers one joint after another', () => {
    const rig = controlled();
    energise(rig, 0);
    const counts: number[] = [];
    for (let k = 0; k < 120; k++) {
      counts.push(rig.state.energised.filter(Boolean).length);
      rig.tick();
    }
    expect(counts.filter((n, k) => k > 0 && n > counts[k - 1]! + 1)).toEqual([]);
    expect(rig.state.energised).toEqual([true, true, true, true]);
    // At least 200 ms from joint to joint, so that the supply does not sag and a jump is seen.
    expect(counts.indexOf(2) - counts.indexOf(1)).toBeGreaterThanOrEqual(20);
  });

  it('begins resting, position unknown, nobody in control', () => {
    const { state } = new Rig(heron);
    expect(state).toMatchObject({ motors: 'resting', control: null, fault: null });
    expect(state.trust).toEqual(['unknown', 'unknown', 'unknown', 'unknown']);
  });

  it('does not make a stepper’s position known', () => {
    const rig = controlled();
    energise(rig, 0);
    rig.tick(200);
    expect(rig.state.trust.slice(0, 3)).toEqual(['unknown', 'unknown', 'unknown']);
  });

  it('lets a servo count as referenced once it has had time for its whole travel', () => {
    const rig = controlled();
    energise(rig, 0, [3]);
    rig.tick(2);
    expect(rig.state.trust[3]).toBe('declared');
    // Heron's wrist: 180° of mechanical range at 0.16 s/60°, so 0.48 s.
    rig.tick(44);
    expect(rig.state.trust[3]).toBe('declared');
    rig.tick(6);
    expect(rig.state.trust[3]).toBe('referenced');
  });

  it('sends a servo’s first signal to where it was said to stand', () => {
    const rig = controlled();
    energise(rig, deg(-20), [3]);
    rig.tick(2);
    expect(rig.telemetry.q[3]).toBe(deg(-20));
  });

  it.each([
    ['a servo whose angle was not said', 'angleMissing', null],
    ['a servo said to stand beyond its mechanics', 'outOfRange', deg(70)],
  ])('is refused for %s', (_, code, servo) => {
    const rig = controlled();
    expect(energise(rig, servo)?.code).toBe(code);
    rig.tick(100);
    expect(rig.state.motors).toBe('resting');
  });

  it('is ended by Stop before the next joint', () => {
    const rig = controlled();
    energise(rig, 0);
    rig.send(moss, { type: 'stop' });
    rig.tick(200);
    expect(rig.state.energised).toEqual([true, false, false, false]);
  });

  it('lets a joint be jogged while others rest, and no other', () => {
    const rig = controlled();
    energise(rig, null, [0]);
    rig.tick(50);
    expect(press(rig, jog(1))?.code).toBe('resting');
    expect(press(rig, jog(0))).toBeNull();
  });

  it('keeps motion waiting until it is done', () => {
    const rig = controlled();
    energise(rig, 0);
    rig.tick(5);
    expect(press(rig, jog(0))?.code).toBe('energising');
  });
});

describe('motors off', () => {
  it('names the joints that would drop, and is refused until they were seen', () => {
    const rig = middleRig();
    // Detent torque through Heron's light gearing cannot carry the stretched upper arm and forearm.
    expect(rig.state.wouldDrop).toEqual([1, 2]);
    const refused = rig.send(juno, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [1] });
    expect(refused?.code).toBe('wouldDrop');
    expect(refused?.message).toContain('Forearm');
    expect(rig.state.motors).toBe('standing');
  });

  it('takes trust away: joints that drop are unknown, joints that stay doubtful', () => {
    const rig = middleRig();
    expect(rig.send(juno, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [1, 2] })).toBeNull();
    expect(rig.state.motors).toBe('resting');
    expect(rig.state.trust).toEqual(['doubtful', 'unknown', 'unknown', 'doubtful']);
  });

  it('needs no control', () => {
    const rig = middleRig();
    expect(
      rig.send(moss, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [0, 1, 2, 3] }),
    ).toBeNull();
    expect(rig.state.motors).toBe('resting');
  });

  it('is refused while the arm moves', () => {
    const rig = readyRig();
    press(rig, jog(0));
    expect(rig.send(juno, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [1, 2] })?.code).toBe(
      'moving',
    );
  });

  it('really drops the arm, as the truth shows, while the page keeps what it last believed', () => {
    const rig = middleRig();
    rig.send(juno, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [1, 2] });
    rig.tick(300);
    const { truth, q } = rig.telemetry;
    expect(truth![1]).toBeLessThan(MIDDLE[1]! - deg(5));
    expect(q[1]).toBeCloseTo(MIDDLE[1]!, 9);
  });
});
