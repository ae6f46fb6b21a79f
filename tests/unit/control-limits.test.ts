import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import type { ArmModel } from '../../shared/arm/model';
import { compileChain, linkFrames, type Transform } from '../../shared/kinematics';
import { juno, keep } from '../support/ready-arm';
import { Rig, TICK_S } from '../support/rig';

/** What a person may do at the buttons, one after the other, with pauses between. */
type Act =
  | { do: 'jog'; axis: number; direction: 1 | -1; ticks: number }
  | { do: 'goTo'; shares: number[]; ticks: number }
  | { do: 'ceiling'; fraction: number }
  | { do: 'stop'; ticks: number }
  | { do: 'nothing'; ticks: number };

function acts(n: number): fc.Arbitrary<Act[]> {
  const ticks = fc.integer({ min: 1, max: 120 });
  return fc.array(
    fc.oneof(
      fc.record({
        do: fc.constant('jog' as const),
        axis: fc.integer({ min: 0, max: n - 1 }),
        direction: fc.constantFrom(1 as const, -1 as const),
        ticks,
      }),
      fc.record({
        do: fc.constant('goTo' as const),
        shares: fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: n, maxLength: n }),
        ticks,
      }),
      fc.record({ do: fc.constant('ceiling' as const), fraction: fc.constantFrom(0.01, 0.05, 0.1, 0.25, 1) }),
      fc.record({ do: fc.constant('stop' as const), ticks }),
      fc.record({ do: fc.constant('nothing' as const), ticks }),
    ),
    { minLength: 3, maxLength: 12 },
  );
}

function run(rig: Rig, model: ArmModel, list: readonly Act[]): void {
  let hold = 0;
  const keeping = (ticks: number) => {
    for (let k = 0; k < ticks; k++) {
      if (hold > 0 && k % 5 === 0) keep(rig, `h${hold}`, k);
      // People lower the ceiling in mid-move too.
      rig.tick();
    }
  };
  for (const act of list) {
    if (act.do === 'ceiling')
      rig.send(juno, { type: 'ceiling.set', turn: rig.state.turn, fraction: act.fraction });
    else if (act.do === 'stop') rig.send(juno, { type: 'stop' });
    else if (act.do !== 'nothing') {
      hold++;
      const motion =
        act.do === 'jog'
          ? ({ kind: 'jog', frame: 'joint', axis: act.axis, direction: act.direction } as const)
          : ({
              kind: 'joints',
              q: model.joints.map(({ limits: l }, i) => l.lower + act.shares[i]! * (l.upper - l.lower)),
            } as const);
      rig.send(juno, { type: 'hold.start', turn: rig.state.turn, holdId: `h${hold}`, motion });
    }
    if ('ticks' in act) keeping(act.ticks);
  }
}

/** Differences of what reached the board, of the given order, per joint: rad/s, rad/s², rad/s³. */
function worstDifferences(rig: Rig, from: number, model: ArmModel): number[][] {
  const path = rig.setpoints.slice(from).map(({ q }) => q);
  return [1, 2, 3].map((order) =>
    model.joints.map((_, j) => {
      let rows = path.map((q) => q[j]!);
      for (let k = 0; k < order; k++) rows = rows.slice(1).map((x, i) => (x - rows[i]!) / TICK_S);
      return Math.max(0, ...rows.map(Math.abs));
    }),
  );
}

describe.each(Object.entries(DEMO_ARMS))('whatever is done at the buttons of %s', (_, model) => {
  it('keeps every joint inside its speed, acceleration, jerk and soft limits, and the supervisor silent', () => {
    fc.assert(
      fc.property(acts(model.joints.length), fc.integer({ min: 1, max: 1000 }), (list, seed) => {
        const rig = new Rig(model, { seed });
        rig.energise(juno);
        rig.declare(juno);
        rig.tick(5);
        const from = rig.setpoints.length;
        run(rig, model, list);
        expect(rig.state.fault).toBeNull();
        const [v, a, j] = worstDifferences(rig, from, model) as [number[], number[], number[]];
        for (const [i, { limits }] of model.joints.entries()) {
          // Third differences of doubles at 10 ms carry some 1e-9 of noise.
          expect(v[i]! / limits.velocity).toBeLessThanOrEqual(1 + 1e-6);
          expect(a[i]! / limits.acceleration).toBeLessThanOrEqual(1 + 1e-6);
          expect(j[i]! / limits.jerk).toBeLessThanOrEqual(1 + 1e-6);
          for (const { q } of rig.setpoints.slice(from)) {
            expect(q[i]).toBeLessThanOrEqual(limits.upper + 1e-9);
            expect(q[i]).toBeGreaterThanOrEqual(limits.lower - 1e-9);
          }
        }
      }),
      { numRuns: 25, seed: 20 },
    );
  });

  it('moves no joint and no tool point faster than 250 mm/s', () => {
    const chain = compileChain(model);
    fc.assert(
      fc.property(acts(model.joints.length), (list) => {
        const rig = new Rig(model, { seed: 4 });
        rig.energise(juno);
        rig.declare(juno);
        rig.tick(5);
        const from = rig.setpoints.length;
        run(rig, model, list);
        const places = rig.setpoints
          .slice(from)
          .map(({ q }) => linkFrames(chain, q).map(({ position }: Transform) => [...position]));
        let fastest = 0;
        for (let k = 1; k < places.length; k++)
          for (const [p, now] of places[k]!.entries()) {
            const was = places[k - 1]![p]!;
            const moved = Math.hypot(now[0]! - was[0]!, now[1]! - was[1]!, now[2]! - was[2]!);
            fastest = Math.max(fastest, moved / TICK_S);
          }
        // ISO 10218-1: 250 mm/s in reduced-speed mode; here for every point of the arm.
        expect(fastest).toBeLessThanOrEqual(0.25 * (1 + 1e-9));
      }),
      { numRuns: 15, seed: 21 },
    );
  });
});
