import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import type { ProgramStep } from '../../shared/sequence/program';
import { rehearse } from '../../shared/sequence/rehearse';
import { goTo, grip, programOf, wait } from '../support/programs';
import {
  deg,
  energisedRig,
  isStill,
  jog,
  juno,
  keepFor,
  letGo,
  MIDDLE,
  middleRig,
  moss,
  offBy,
  press,
  setCeiling,
} from '../support/ready-arm';
import { type Rig, TICK_S } from '../support/rig';

const A = [deg(-10), deg(55), deg(-75), deg(-35)];
const B = [deg(15), deg(65), deg(-90), deg(-50)];
const STEPS: ProgramStep[] = [goTo('a', A), grip('g', 0.3), goTo('b', B), wait('w', 0.5)];

interface Start {
  cycles?: number | null;
  fromStep?: string;
  single?: boolean;
}
function start(rig: Rig, steps = STEPS, proven = true, options: Start = {}) {
  return rig.send(
    juno,
    { type: 'run.start', turn: rig.state.turn, sequenceId: 'seq-1', cycles: 1, ...options },
    programOf(steps, proven),
  );
}
const order = (rig: Rig, type: 'run.pause' | 'run.resume' | 'run.step' | 'run.end') =>
  rig.send(juno, { type, turn: rig.state.turn });

function tickUntil(rig: Rig, done: () => boolean, seconds = 60): number {
  for (let k = 0; k < seconds / TICK_S; k++) {
    if (done()) return k * TICK_S;
    rig.tick();
  }
  throw new Error('it never came to that');
}
const phase = (rig: Rig) => rig.state.run?.phase ?? null;
const ended = (rig: Rig) => rig.records.find((r) => r.kind === 'runEnded');

/** Holds the held cycle until its hold ends. */
function holdThrough(rig: Rig): void {
  press(rig, { kind: 'run' }, 'cycle');
  for (let k = 0; rig.state.hold && k < 10_000; k += 10) keepFor(rig, 'cycle', 10, k);
}

describe('a run', () => {
  it('counts down 3 s before it moves unheld', () => {
    const rig = middleRig();
    expect(start(rig)).toBeNull();
    expect(phase(rig)).toBe('countdown');
    rig.tick(295);
    expect(offBy(rig, MIDDLE)).toBeLessThan(1e-12);
    rig.tick(20);
    expect(offBy(rig, MIDDLE)).toBeGreaterThan(0);
  });

  it('does its steps in order and ends finished, having said how long each cycle took', () => {
    const rig = middleRig();
    start(rig, STEPS, true, { cycles: 3 });
    tickUntil(rig, () => ended(rig) !== undefined);
    expect(ended(rig)).toMatchObject({ how: 'finished', cyclesDone: 3 });
    expect(rig.records.filter((r) => r.kind === 'runCycle').map((r) => r.cycle)).toEqual([1, 2, 3]);
    expect(offBy(rig, B)).toBeLessThan(1e-9);
    expect(rig.state.gripper?.opening).toBe(0.3);
  });

  it('takes as long as it was rehearsed, from the second cycle on', () => {
    const rig = middleRig();
    const steps = [...STEPS, grip('open', 0.9)];
    start(rig, steps, true, { cycles: 2 });
    tickUntil(rig, () => ended(rig) !== undefined);
    const seconds = rig.records.flatMap((r) => (r.kind === 'runCycle' ? [r.seconds] : []));
    const { duration } = rehearse({ model: heron, steps, ceiling: 0.25 });
    // Each step ends on a tick: at most one tick a step longer.
    expect(seconds).toHaveLength(2);
    expect(Math.abs(seconds[1]! - duration)).toBeLessThan((steps.length + 1) * TICK_S);
  });

  it('goes on until it is ended when no number of cycles is asked', () => {
    const rig = middleRig();
    start(rig, [wait('w', 0.1)], true, { cycles: null });
    rig.tick(300 + 500);
    expect(rig.state.run!.cycle).toBeGreaterThan(30);
    order(rig, 'run.end');
    expect(ended(rig)).toMatchObject({ how: 'ended' });
  });

  it('begins at the step it was told to', () => {
    const rig = middleRig();
    start(rig, STEPS, true, { fromStep: 'b' });
    expect(rig.state.run?.stepId).toBe('b');
    tickUntil(rig, () => ended(rig) !== undefined);
    expect(offBy(rig, B)).toBeLessThan(1e-9);
    expect(rig.state.gripper?.opening).toBe(1);
  });

  it('waits after every step when it goes one at a time', () => {
    const rig = middleRig();
    start(rig, STEPS, true, { single: true });
    for (const next of ['g', 'b', 'w']) {
      tickUntil(rig, () => phase(rig) === 'stepWaiting');
      expect(rig.state.run?.stepId).toBe(next);
      rig.tick(50);
      expect(phase(rig)).toBe('stepWaiting');
      expect(order(rig, 'run.step')).toBeNull();
    }
    tickUntil(rig, () => ended(rig) !== undefined);
  });

  it('pauses on its path, and resumes after a countdown to arrive where it would have', () => {
    const rig = middleRig();
    start(rig, [goTo('a', A)]);
    tickUntil(rig, () => offBy(rig, MIDDLE) > 0.05);
    expect(order(rig, 'run.pause')).toBeNull();
    expect(phase(rig)).toBe('pausing');
    rig.settle();
    rig.tick();
    expect(phase(rig)).toBe('paused');
    const { q } = rig.telemetry;
    // On the straight line between start and end: the same share of the way for every joint.
    const shares = q.map((value, i) => (value - MIDDLE[i]!) / (A[i]! - MIDDLE[i]!));
    for (const share of shares) expect(share).toBeCloseTo(shares[0]!, 9);
    order(rig, 'run.resume');
    expect(phase(rig)).toBe('countdown');
    rig.tick(250);
    expect(rig.telemetry.q).toEqual(q);
    tickUntil(rig, () => ended(rig) !== undefined);
    expect(offBy(rig, A)).toBeLessThan(1e-9);
  });

  it('follows a ceiling that is lowered while it runs', () => {
    const rig = middleRig();
    start(rig, [goTo('a', [deg(-100), ...MIDDLE.slice(1)])]);
    tickUntil(rig, () => offBy(rig, MIDDLE) > 0.2);
    setCeiling(rig, 0.02);
    rig.tick(60);
    expect(Math.abs(rig.telemetry.qd[0]!)).toBeCloseTo(0.02 * heron.joints[0]!.limits.velocity, 9);
    expect(phase(rig)).toBe('running');
  });

  it('goes slower where a step is set slower', () => {
    const rig = middleRig();
    start(rig, [goTo('a', [deg(-60), ...MIDDLE.slice(1)], 0.1)]);
    tickUntil(rig, () => offBy(rig, MIDDLE) > 0.2);
    expect(Math.abs(rig.telemetry.qd[0]!)).toBeCloseTo(0.1 * heron.joints[0]!.limits.velocity, 9);
  });
});

describe('the first cycle of a version', () => {
  it('does not move until it is held', () => {
    const rig = middleRig();
    start(rig, STEPS, false);
    expect(phase(rig)).toBe('heldWaiting');
    rig.tick(500);
    expect(offBy(rig, MIDDLE)).toBeLessThan(1e-12);
  });

  it('is proven once it has been held through, and then waits to be resumed', () => {
    const rig = middleRig();
    start(rig, STEPS, false, { cycles: 2 });
    holdThrough(rig);
    expect(rig.records).toContainEqual(
      expect.objectContaining({ kind: 'programProven', fingerprint: 'print-1', who: 'Juno' }),
    );
    expect(rig.state.run).toMatchObject({ phase: 'paused', held: false, cycle: 2 });
    rig.tick(500);
    expect(phase(rig)).toBe('paused');
    order(rig, 'run.resume');
    tickUntil(rig, () => ended(rig) !== undefined);
    expect(ended(rig)).toMatchObject({ how: 'finished', cyclesDone: 2 });
  });

  it('stops when the hand lets go, and goes on with a new press', () => {
    const rig = middleRig();
    start(rig, [goTo('a', A)], false);
    press(rig, { kind: 'run' }, 'h');
    keepFor(rig, 'h', 60);
    letGo(rig, 'h');
    rig.settle();
    const { q } = rig.telemetry;
    rig.tick(300);
    expect(rig.telemetry.q).toEqual(q);
    expect(phase(rig)).toBe('heldWaiting');
    holdThrough(rig);
    expect(ended(rig)).toMatchObject({ how: 'finished' });
    expect(offBy(rig, A)).toBeLessThan(1e-9);
  });

  it('goes at most at easy, even where trust and ceiling allow more', () => {
    const rig = middleRig();
    for (const joint of heron.referenceOrder) {
      press(rig, { kind: 'reference', joint }, `r${joint}`);
      for (let k = 0; rig.state.hold; k += 10) keepFor(rig, `r${joint}`, 10, k);
    }
    setCeiling(rig, 1);
    const far = rig.telemetry.q.map((x, i) => (i === 3 ? -0.5 : x));
    start(rig, [goTo('a', far)], false);
    const from = rig.setpoints.length;
    holdThrough(rig);
    const path = rig.setpoints.slice(from).map(({ q }) => q[3]!);
    const fastest = Math.max(...path.slice(1).map((q, k) => Math.abs(q - path[k]!) / TICK_S));
    expect(fastest).toBeLessThanOrEqual(0.25 * heron.joints[3]!.limits.velocity + 1e-9);
    expect(fastest).toBeGreaterThan(0);
  });

  it.each(['socketClosed', 'silence'] as const)(
    'does not go on to the next move when the hold dies in a wait: %s',
    (how) => {
      const rig = middleRig();
      start(rig, [wait('w', 1), goTo('a', A)], false);
      press(rig, { kind: 'run' }, 'h');
      keepFor(rig, 'h', 50);
      if (how === 'socketClosed') rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
      rig.tick(300);
      expect(phase(rig)).toBe('heldWaiting');
      expect(offBy(rig, MIDDLE)).toBeLessThan(1e-12);
    },
  );

  it('does not prove the version when it began in the middle', () => {
    const rig = middleRig();
    start(rig, STEPS, false, { fromStep: 'b', cycles: 2 });
    holdThrough(rig);
    expect(rig.records.some((r) => r.kind === 'programProven')).toBe(false);
    expect(rig.state.run).toMatchObject({ held: true, phase: 'heldWaiting' });
  });
});

describe('a run whose starter is away', () => {
  it('goes on for 10 s, then pauses on its path and waits for them', () => {
    const rig = middleRig();
    setCeiling(rig, 0.05);
    start(rig, [goTo('a', [deg(-100), ...MIDDLE.slice(1)])]);
    rig.tick(350);
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(990);
    expect(phase(rig)).toBe('running');
    rig.tick(100);
    expect(phase(rig)).toBe('paused');
    expect(isStill(rig)).toBe(true);
    expect(rig.state.control).toBeNull();
    rig.send(juno, { type: 'control.take' });
    expect(order(rig, 'run.resume')).toBeNull();
    expect(phase(rig)).toBe('countdown');
  });

  it('ends when somebody else takes control meanwhile: nobody resumes another person’s run', () => {
    const rig = middleRig();
    start(rig, [wait('w', 60)]);
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(1100);
    rig.send(moss, { type: 'control.take' });
    expect(ended(rig)).toMatchObject({ how: 'lost control' });
    expect(rig.state.run).toBeNull();
  });

  it('goes on where the owner has set the arm to run unattended', () => {
    const rig = middleRig({ unattended: true });
    start(rig, [wait('w', 30)]);
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(2000);
    expect(phase(rig)).toBe('running');
    tickUntil(rig, () => ended(rig) !== undefined);
    expect(ended(rig)).toMatchObject({ how: 'finished' });
    rig.tick(2);
    expect(rig.state.control).toBeNull();
  });
});

describe('a run is refused', () => {
  it('while the position is not known', () => {
    expect(start(energisedRig())?.code).toBe('positionUnknown');
  });

  it.each([
    ['without steps', 'nothingToRun', (rig: Rig) => start(rig, [])],
    ['from a step that does nothing', 'noSuchStep', (rig: Rig) => start(rig, STEPS, true, { fromStep: 'x' })],
    [
      'while another one is under way',
      'running',
      (rig: Rig) => {
        start(rig);
        return start(rig);
      },
    ],
    [
      'while the arm moves',
      'moving',
      (rig: Rig) => {
        press(rig, jog(0));
        return start(rig);
      },
    ],
  ])('%s', (_, code, act) => {
    expect(act(middleRig())?.code).toBe(code);
  });

  it.each([
    ['run.pause', 'noRun'],
    ['run.resume', 'noRun'],
    ['run.step', 'notWaiting'],
    ['run.end', 'noRun'],
  ] as const)('%s without a run', (type, code) => {
    expect(order(middleRig(), type)?.code).toBe(code);
  });

  it('to resume unless it is paused', () => {
    const rig = middleRig();
    start(rig);
    expect(order(rig, 'run.resume')?.code).toBe('notPaused');
  });

  it('and so is every other motion during a run', () => {
    const rig = middleRig();
    start(rig, [wait('w', 60)]);
    rig.tick(400);
    expect(press(rig, jog(0))?.code).toBe('running');
    expect(press(rig, { kind: 'run' })?.code).toBe('notHeld');
  });
});
