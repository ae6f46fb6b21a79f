import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { goTo, programOf } from '../support/programs';
import {
  deg,
  isStill,
  jog,
  juno,
  keepFor,
  MIDDLE,
  middleRig,
  moss,
  offBy,
  press,
  readyRig,
} from '../support/ready-arm';
import { actor, Rig } from '../support/rig';

const otis = actor('Otis', 'observer');
const acknowledge = (rig: Rig, who = juno) =>
  rig.send(who, { type: 'fault.acknowledge', turn: rig.state.turn });
const startRun = (rig: Rig) =>
  rig.send(
    juno,
    { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
    programOf([goTo('1', [deg(-60), ...MIDDLE.slice(1)])]),
  );

describe('stop', () => {
  it.each([10, 40, 80, 150, 300])(
    'by an observer rests each joint where the stopping shadow was, %i ticks into a move',
    (ticks) => {
      const rig = middleRig();
      press(rig, { kind: 'joints', q: [deg(70), deg(30), deg(-40), deg(10)] });
      keepFor(rig, 'h', ticks);
      const { stopAt } = rig.telemetry;
      expect(rig.send(otis, { type: 'stop' })).toBeNull();
      rig.settle();
      rig.tick(2);
      expect(offBy(rig, stopAt)).toBeLessThan(1e-9);
      // Within 0.2° of where the arm really rests.
      for (const [i, truth] of rig.telemetry.truth!.entries())
        expect(Math.abs(truth - stopAt[i]!)).toBeLessThan(deg(0.2));
    },
  );

  it('leaves the motors energised and the trust as it was', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    const { trust } = rig.state;
    rig.send(otis, { type: 'stop' });
    rig.settle();
    expect(rig.state.motors).toBe('standing');
    expect(rig.state.trust).toEqual(trust);
  });

  it('drops the run, and nothing resumes by itself', () => {
    const rig = middleRig();
    startRun(rig);
    rig.tick(400);
    rig.send(otis, { type: 'stop' });
    rig.settle();
    const { q } = rig.telemetry;
    rig.tick(1000);
    expect(rig.telemetry.q).toEqual(q);
    expect(rig.records).toContainEqual(expect.objectContaining({ kind: 'runEnded', how: 'stopped' }));
  });

  it('ends a countdown before anything moves', () => {
    const rig = middleRig();
    startRun(rig);
    rig.tick(100);
    rig.queue({ kind: 'stop', by: 'Otis' });
    rig.tick(400);
    expect(offBy(rig, MIDDLE)).toBeLessThan(1e-12);
  });

  it('is acknowledged when the board has been heard since', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.send(otis, { type: 'stop' });
    expect(rig.state.stop).toMatchObject({ by: 'Otis', acknowledged: false });
    rig.tick();
    expect(rig.state.stop?.acknowledged).toBe(true);
  });

  it('tells the board to stop by itself when the board does not show the arm standing', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.send(otis, { type: 'stop' });
    let told = false;
    rig.onTick = () => {
      told ||= rig.outputs.linkStop;
    };
    // The board says that it moves, whatever it is told.
    const sample = rig.link.latestSample.bind(rig.link);
    rig.link.latestSample = () => ({ ...sample(), moving: true });
    rig.tick(200);
    expect(told).toBe(true);
    expect(rig.state.fault?.code).toBe('stopNotSeen');
  });

  it('works with nobody in control, while resting, and during a fault', () => {
    const rig = new Rig(heron);
    expect(rig.send(otis, { type: 'stop' })).toBeNull();
    expect(rig.state.stop?.by).toBe('Otis');
  });
});

describe('a fault', () => {
  /** The board stops the arm by itself in mid-move. */
  function boardStops(): Rig {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.link.board.stop();
    rig.tick(150);
    return rig;
  }

  it('ends what was under way and lets nothing move until it is acknowledged', () => {
    const rig = boardStops();
    expect(rig.state.fault).toMatchObject({ code: 'boardFault', hard: false });
    expect(rig.state.motors).toBe('faulted');
    expect(press(rig, jog(0))?.code).toBe('faulted');
    expect(startRun(rig)?.code).toBe('faulted');
    expect(
      rig.send(juno, { type: 'nudge', turn: rig.state.turn, frame: 'joint', axis: 0, amount: deg(1) })?.code,
    ).toBe('faulted');
  });

  it('that is plain is acknowledged by whoever has control, and then the arm may move again', () => {
    const rig = boardStops();
    const where = rig.link.board.sample().q;
    expect(acknowledge(rig)).toBeNull();
    rig.tick(5);
    expect(rig.state.fault).toBeNull();
    // The arm goes on from where the board stopped it, not from where it was to go.
    expect(offBy(rig, where)).toBeLessThan(1e-12);
    expect(press(rig, jog(0))).toBeNull();
    keepFor(rig, 'h', 60);
    expect(rig.state.motors).toBe('moving');
  });

  it('is not acknowledged by somebody else, nor when there is none', () => {
    expect(acknowledge(boardStops(), moss)?.code).toBe('notInControl');
    expect(acknowledge(middleRig())?.code).toBe('noFault');
  });

  it('that is hard needs a builder', () => {
    const rig = middleRig();
    rig.link.board.restart();
    rig.tick(2);
    expect(rig.state.fault).toMatchObject({ code: 'boardRestarted', hard: true });
    expect(acknowledge(rig)?.code).toBe('needsBuilder');
    rig.send(juno, { type: 'control.handBack', turn: rig.state.turn });
    rig.send(moss, { type: 'control.take' });
    expect(acknowledge(rig, moss)).toBeNull();
    expect(rig.state.fault).toBeNull();
  });

  it('is not acknowledged while the arm still moves', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.link.board.stop();
    rig.tick(2);
    expect(acknowledge(rig)?.code).toBe('moving');
  });
});

describe('a board that restarts', () => {
  it('leaves the arm resting, its position unknown', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.link.board.restart();
    rig.tick(2);
    expect(rig.state.energised).toEqual([false, false, false, false]);
    expect(rig.state.trust).toEqual(['unknown', 'unknown', 'unknown', 'unknown']);
    expect(rig.state.hold).toBeNull();
  });
});

describe('a link that is lost', () => {
  it('stops the plan, makes the position doubtful and refuses to move', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.linkClosed = true;
    rig.tick(2);
    expect(rig.state.link.state).toBe('lost');
    expect(rig.state.fault?.code).toBe('linkLost');
    expect(new Set(rig.state.trust)).toEqual(new Set(['doubtful']));
    const sent = rig.setpoints.length;
    rig.tick(100);
    expect(rig.setpoints.length).toBe(sent);
    expect(press(rig, jog(0))?.code).toBe('noLink');
  });

  it('counts as lost after 250 ms of a board whose clock stands still', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    const frozen = rig.link.latestSample();
    rig.link.latestSample = () => frozen;
    keepFor(rig, 'h', 24, 1000);
    expect(rig.state.link.state).toBe('steady');
    keepFor(rig, 'h', 4, 2000);
    expect(rig.state).toMatchObject({ link: { state: 'lost' }, fault: { code: 'linkQuiet' } });
  });

  it('comes back with the arm where its own board stopped it, and stands until a person acts', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.linkClosed = true;
    rig.tick(100);
    rig.linkClosed = false;
    rig.tick(5);
    expect(rig.state.link.state).toBe('steady');
    expect(rig.state.fault?.code).toBe('linkLost');
    expect(offBy(rig, rig.link.board.sample().q)).toBeLessThan(1e-12);
    const { q } = rig.telemetry;
    rig.tick(200);
    expect(rig.telemetry.q).toEqual(q);
  });

  it('keeps motors off from pretending', () => {
    const rig = middleRig();
    rig.linkClosed = true;
    rig.tick(2);
    expect(rig.send(juno, { type: 'motors.off', turn: rig.state.turn, dropsAccepted: [1, 2] })?.code).toBe(
      'noLink',
    );
  });
});

describe('a board that does not do what it is told', () => {
  it('is a hard fault when it counts elsewhere', () => {
    const rig = middleRig();
    const sample = rig.link.latestSample.bind(rig.link);
    rig.link.latestSample = () => {
      const s = sample();
      return { ...s, q: s.q.map((x, i) => (i === 1 ? x + deg(3) : x)) };
    };
    rig.tick(30);
    expect(rig.state.fault).toMatchObject({ code: 'deviation', hard: true });
    expect(rig.state.trust[1]).toBe('doubtful');
  });

  it('is a hard fault when its drivers go off by themselves', () => {
    const rig = middleRig();
    rig.link.board.motorsOff();
    rig.tick(30);
    expect(rig.state.fault).toMatchObject({ code: 'driversOff', hard: true });
    expect(rig.state.motors).toBe('faulted');
    expect(rig.state.energised).toEqual([false, false, false, false]);
    expect(rig.state.trust[1]).toBe('unknown');
  });
});

describe('a motor that is asked for more than it has', () => {
  it('makes its joint doubtful, says so and stops', () => {
    const rig = readyRig();
    // The model itself is weak: 40 % of the torque cannot hold the arm stretched out.
    const weak = structuredClone(heron);
    const drive = weak.joints[1]!.drive;
    if (drive.kind === 'stepper') drive.efficiency *= 0.4;
    const slow = new Rig(weak, { seed: 2 });
    slow.energise(juno);
    slow.declare(juno, [0, deg(100), deg(-130), deg(-40)]);
    slow.send(juno, { type: 'ceiling.set', turn: slow.state.turn, fraction: 0.25 });
    press(slow, { kind: 'joints', q: [0, deg(10), deg(-25), 0] });
    keepFor(slow, 'h', 2000);
    expect(slow.state.trust[1]).toBe('doubtful');
    expect(slow.state.fault).toMatchObject({ code: 'noTorqueLeft', hard: false });
    expect(slow.state.fault?.message).toContain('Upper arm');
    expect(isStill(slow)).toBe(true);
    expect(rig.state.fault).toBeNull();
  });
});
