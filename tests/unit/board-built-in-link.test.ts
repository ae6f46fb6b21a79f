import { describe, expect, it } from 'vitest';
import { BuiltInLink } from '../../server/links/built-in-link';
import { heron } from '../../shared/arm/demo/heron';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';

const TICK = 0.01;
const link = (seed = 1) => new BuiltInLink({ model: heron, seed, tickS: TICK });

describe('the built-in arm', () => {
  it('has a sample from the start, and a newer one after each tick', () => {
    const l = link();
    const first = l.latestSample();
    l.advance(TICK);
    expect(l.latestSample().t).toBeCloseTo(first.t + TICK, 12);
  });

  it('does the same again from the same seed, and lies elsewhere from another', () => {
    expect(link(5).latestSample()).toEqual(link(5).latestSample());
    expect(link(5).latestSample().truth).not.toEqual(link(6).latestSample().truth);
  });

  it('buffers one tick: a set-point is reached in the next', () => {
    const l = link();
    for (let i = 0; i < 4; i++) l.order({ kind: 'energise', joint: i, assumed: 0 });
    l.send({ t: TICK, q: [1e-5, 0, 0, 0], gripper: null });
    expect(l.latestSample().q[0]).toBe(0);
    expect(l.lead()).toBe(TICK);
    l.advance(TICK);
    expect(l.latestSample().q[0]).toBe(1e-5);
  });

  it('lets a newer set-point replace the buffered one', () => {
    const l = link();
    l.order({ kind: 'energise', joint: 0, assumed: 0 });
    l.send({ t: TICK, q: [1e-5, 0, 0, 0], gripper: null });
    l.replaceFrom({ t: TICK, q: [2e-5, 0, 0, 0], gripper: null });
    l.advance(TICK);
    expect(l.latestSample().q[0]).toBe(2e-5);
  });

  it('keeps a set-point as it was sent, whatever the sender does with its array', () => {
    const l = link();
    l.order({ kind: 'energise', joint: 0, assumed: 0 });
    const q = [1e-5, 0, 0, 0];
    l.send({ t: TICK, q, gripper: null });
    q[0] = 1;
    l.advance(TICK);
    expect(l.latestSample().q[0]).toBe(1e-5);
  });

  it('takes every order twice without harm', () => {
    const l = link();
    const orders = [
      { kind: 'energise', joint: 0, assumed: 0.1 },
      { kind: 'energiseGripper', assumed: 0.5 },
      { kind: 'declare', joint: 0, q: 0.2 },
      { kind: 'watchSwitch', joint: 0 },
      { kind: 'clear' },
      { kind: 'motorsOff' },
    ] as const;
    for (const order of orders) {
      l.order(order);
      const once = structuredClone(l.board.sample());
      l.order(order);
      expect(l.board.sample()).toEqual(once);
    }
  });

  it('tells its listeners once when it is closed, and not those that left', () => {
    const l = link();
    const heard: string[] = [];
    l.onClosed(() => heard.push('a'));
    l.onClosed(() => heard.push('b'))();
    l.close();
    l.close();
    expect(heard).toEqual(['a']);
  });

  it.each(Object.entries(DEMO_ARMS))('lies still, unpowered, where %s was put down or falls', (_, model) => {
    const l = new BuiltInLink({ model, seed: 3, tickS: TICK });
    for (let k = 0; k < 6000; k++) l.advance(TICK);
    const { truth } = l.latestSample();
    for (let k = 0; k < 100; k++) l.advance(TICK);
    // A minute later the last of the sinking is below 0.3° a second, and everything is inside its mechanics.
    for (const [i, { hardRange }] of model.joints.entries()) {
      expect(l.latestSample().truth![i]).toBeCloseTo(truth![i]!, 2);
      expect(truth![i]).toBeGreaterThanOrEqual(hardRange.lower);
      expect(truth![i]).toBeLessThanOrEqual(hardRange.upper);
    }
  });
});
