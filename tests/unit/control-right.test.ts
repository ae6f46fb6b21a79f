import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { goTo, programOf, wait } from '../support/programs';
import {
  ada,
  isStill,
  jog,
  juno,
  keepFor,
  MIDDLE,
  middleRig,
  moss,
  press,
  setCeiling,
} from '../support/ready-arm';
import { actor, Rig } from '../support/rig';

const junoElsewhere = { ...juno, socketId: 'Juno-2' };
const otis = actor('Otis', 'observer');

describe('control', () => {
  it('is taken when nobody has it, and starts a new turn', () => {
    const rig = new Rig(heron);
    const before = rig.state.turn;
    expect(rig.send(juno, { type: 'control.take' })).toBeNull();
    expect(rig.state.control).toMatchObject({ userId: juno.userId, name: 'Juno', away: false });
    expect(rig.state.turn).toBe(before + 1);
  });

  it('starts every turn at creep', () => {
    const rig = middleRig();
    setCeiling(rig, 0.25);
    rig.send(juno, { type: 'control.handBack', turn: rig.state.turn });
    rig.send(moss, { type: 'control.take' });
    expect(rig.state.ceiling).toMatchObject({ person: 0.05, peopleClear: false });
  });

  it('is asked for when somebody has it, and given when they say yes', () => {
    const rig = middleRig();
    const turn = rig.state.turn;
    rig.send(moss, { type: 'control.take' });
    expect(rig.state.control).toMatchObject({ name: 'Juno', request: { name: 'Moss' } });
    rig.send(juno, { type: 'control.answer', accept: true });
    expect(rig.state.control?.name).toBe('Moss');
    expect(rig.state.turn).toBe(turn + 1);
  });

  it('stays when they say no', () => {
    const rig = middleRig();
    rig.send(moss, { type: 'control.take' });
    rig.send(juno, { type: 'control.answer', accept: false });
    rig.tick(1100);
    expect(rig.state.control).toMatchObject({ name: 'Juno', request: null });
  });

  it('goes after 10 s of silence, and no sooner', () => {
    const rig = middleRig();
    rig.send(moss, { type: 'control.take' });
    rig.tick(990);
    expect(rig.state.control?.name).toBe('Juno');
    rig.tick(15);
    expect(rig.state.control?.name).toBe('Moss');
  });

  it('does not go while the arm moves, however long the silence', () => {
    const rig = middleRig();
    rig.send(juno, { type: 'ceiling.set', turn: rig.state.turn, fraction: 0.02 });
    rig.send(moss, { type: 'control.take' });
    press(rig, jog(0));
    keepFor(rig, 'h', 1500);
    expect(rig.state.motors).toBe('moving');
    expect(rig.state.control?.name).toBe('Juno');
    rig.tick(100);
    expect(isStill(rig)).toBe(true);
    expect(rig.state.control?.name).toBe('Moss');
  });

  it('refuses a second person who asks meanwhile', () => {
    const rig = middleRig();
    rig.send(moss, { type: 'control.take' });
    expect(rig.send(ada, { type: 'control.take' })?.code).toBe('alreadyAsked');
  });

  it('is forced by the owner alone, and only once the arm has stopped', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 50);
    expect(rig.send(moss, { type: 'control.take', force: true })?.code).toBe('notAllowed');
    expect(rig.state.motors).toBe('moving');
    expect(rig.send(ada, { type: 'control.take', force: true })).toBeNull();
    expect(rig.state.motors).toBe('stopping');
    expect(rig.state.control?.name).toBe('Juno');
    rig.settle();
    rig.tick();
    expect(rig.state.control?.name).toBe('Ada');
  });

  it('cannot be kept from an owner who forces it by saying no', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 50);
    rig.send(ada, { type: 'control.take', force: true });
    expect(rig.send(juno, { type: 'control.answer', accept: false })?.code).toBe('forced');
  });

  it('is handed over to a person who watches and may', () => {
    const rig = middleRig();
    const { turn } = rig.state;
    const over = { type: 'control.handOver', turn, toUserId: 'x' } as const;
    expect(rig.send(juno, over)?.code).toBe('notWatching');
    expect(rig.send(juno, over, { person: otis })?.code).toBe('notAllowed');
    expect(rig.send(juno, over, { person: moss })).toBeNull();
    expect(rig.state.control?.name).toBe('Moss');
  });

  it('is not handed over or back while the arm moves', () => {
    const rig = middleRig();
    press(rig, jog(0));
    const { turn } = rig.state;
    expect(rig.send(juno, { type: 'control.handBack', turn })?.code).toBe('moving');
    expect(rig.send(juno, { type: 'control.handOver', turn, toUserId: 'x' }, { person: moss })?.code).toBe(
      'moving',
    );
  });

  it('is not handed on while a run is under way', () => {
    const rig = middleRig();
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
      programOf([wait('1', 60)]),
    );
    expect(rig.send(juno, { type: 'control.handBack', turn: rig.state.turn })?.code).toBe('running');
  });

  it('is not said yes to while a run is under way, but once it is paused, which ends it', () => {
    const rig = middleRig();
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
      programOf([wait('1', 60)]),
    );
    rig.send(moss, { type: 'control.take' });
    expect(rig.send(juno, { type: 'control.answer', accept: true })?.code).toBe('running');
    rig.send(juno, { type: 'run.pause', turn: rig.state.turn });
    expect(rig.send(juno, { type: 'control.answer', accept: true })).toBeNull();
    expect(rig.state.control?.name).toBe('Moss');
    expect(rig.state.run).toBeNull();
  });

  it('is answered by its holder alone, and only when somebody asks', () => {
    const rig = middleRig();
    expect(rig.send(moss, { type: 'control.answer', accept: true })?.code).toBe('notInControl');
    expect(rig.send(juno, { type: 'control.answer', accept: true })?.code).toBe('nobodyAsks');
  });

  it('moves to the other tab of the same session at rest, with a new turn, and not in motion', () => {
    const rig = middleRig();
    const { turn } = rig.state;
    press(rig, jog(0));
    expect(rig.send(junoElsewhere, { type: 'control.take' })?.code).toBe('moving');
    keepFor(rig, 'h', 1);
    rig.tick(100);
    expect(rig.send(junoElsewhere, { type: 'control.take' })).toBeNull();
    expect(rig.state.turn).toBe(turn + 1);
    expect(press(rig, jog(0))?.code).toBe('notInControl');
  });
});

describe('a holder whose socket is lost', () => {
  it('may come back within 10 s and keeps the turn, at creep', () => {
    const rig = middleRig();
    const { turn } = rig.state;
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(900);
    expect(rig.state.control).toMatchObject({ name: 'Juno', away: true });
    rig.send(junoElsewhere, { type: 'control.take' });
    expect(rig.state.control).toMatchObject({ name: 'Juno', away: false });
    expect(rig.state.turn).toBe(turn);
    expect(rig.state.ceiling.person).toBe(0.05);
  });

  it('loses control after 10 s, which starts a new turn', () => {
    const rig = middleRig();
    const { turn } = rig.state;
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(1010);
    expect(rig.state.control).toBeNull();
    expect(rig.state.turn).toBe(turn + 1);
  });

  it('is waited for even when somebody else asks; then that person gets it', () => {
    const rig = middleRig();
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(100);
    rig.send(moss, { type: 'control.take' });
    rig.tick(50);
    expect(rig.state.control?.name).toBe('Juno');
    rig.tick(900);
    expect(rig.state.control?.name).toBe('Moss');
  });

  it('gets no further joint energised', () => {
    const rig = new Rig(heron);
    rig.send(juno, { type: 'control.take' });
    rig.send(juno, {
      type: 'motors.energise',
      turn: rig.state.turn,
      servoAngles: [{ joint: 3, q: 0 }],
      cautionsRead: true,
    });
    rig.queue({ kind: 'socketClosed', socketId: juno.socketId });
    rig.tick(200);
    expect(rig.state.energised).toEqual([true, false, false, false]);
  });
});

describe('a session that ends', () => {
  it('stops what moves and gives up control at once', () => {
    const rig = middleRig();
    press(rig, jog(0));
    keepFor(rig, 'h', 60);
    rig.queue({ kind: 'sessionEnded', sessionId: juno.sessionId });
    rig.tick();
    expect(rig.state.control).toBeNull();
    expect(rig.state.hold).toBeNull();
    expect(rig.state.motors).toBe('stopping');
    rig.settle();
    expect(rig.state.fault).toBeNull();
  });

  it('ends its run as lost control', () => {
    const rig = middleRig();
    rig.send(
      juno,
      { type: 'run.start', turn: rig.state.turn, sequenceId: 's', cycles: 1 },
      programOf([
        goTo(
          '1',
          MIDDLE.map((x) => x - 0.3),
        ),
      ]),
    );
    rig.tick(400);
    rig.queue({ kind: 'sessionEnded', sessionId: juno.sessionId });
    rig.tick();
    expect(rig.records).toContainEqual(expect.objectContaining({ kind: 'runEnded', how: 'lost control' }));
  });
});

describe('every motion message', () => {
  const ordered = (turn: number) => [
    { type: 'hold.start', turn, holdId: 'h', motion: jog(0) } as const,
    { type: 'nudge', turn, frame: 'joint', axis: 0, amount: 0.5 * (Math.PI / 180) } as const,
    { type: 'gripper.set', turn, opening: 0.5 } as const,
    { type: 'run.start', turn, sequenceId: 's', cycles: 1 } as const,
    { type: 'run.pause', turn } as const,
    { type: 'run.resume', turn } as const,
    { type: 'run.step', turn } as const,
    { type: 'run.end', turn } as const,
    {
      type: 'motors.energise' as const,
      turn,
      servoAngles: [] as { joint: number; q: number }[],
      cautionsRead: true as const,
    },
    { type: 'trust.declare', turn, q: MIDDLE } as const,
    { type: 'ceiling.set', turn, fraction: 0.1 } as const,
    { type: 'fault.acknowledge', turn } as const,
  ];
  it.each(ordered(0).map((m) => [m.type, m] as const))('%s is refused from an old turn', (_, message) => {
    const rig = middleRig();
    expect(rig.send(juno, { ...message, turn: rig.state.turn - 1 })?.code).toBe('oldTurn');
    expect(isStill(rig)).toBe(true);
  });

  it.each(ordered(0).map((m) => [m.type, m] as const))('%s is refused without control', (_, message) => {
    const rig = middleRig();
    expect(rig.send(moss, { ...message, turn: rig.state.turn })?.code).toBe('notInControl');
  });
});
