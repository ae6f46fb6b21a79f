import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { DEMO_ARMS } from '../../shared/arm/demo-arms';
import { degToRad } from '../../shared/arm/units';
import { outline, reachOf } from '../../src/components/silhouette-outline';

const { heron, wren, dipper } = DEMO_ARMS;
/** Heron by hand: two tubes of 0.30 and 0.28 m on a 0.14 m pedestal, the tool 0.09 m past the wrist. */
const ALONG = [0.3, 0.28, 0.09] as const;
const SHOULDER = 0.14;

const inside = (model: typeof heron) =>
  fc.tuple(
    ...model.joints.map((joint) =>
      fc.double({ min: joint.limits.lower, max: joint.limits.upper, noNaN: true }),
    ),
  );

describe('the outline of a pose', () => {
  // A planar chain: each tube points at the sum of the angles before it.
  it('follows the sines and cosines of a planar arm', () => {
    fc.assert(
      fc.property(inside(heron), (q) => {
        const { points } = outline(heron, q);
        let angle = 0;
        let out = 0;
        let up = SHOULDER;
        for (const [k, length] of ALONG.entries()) {
          angle += q[k + 1]!;
          out += length * Math.cos(angle);
          up += length * Math.sin(angle);
          const [x, z] = points[k + 3]!;
          expect(x).toBeCloseTo(out, 9);
          expect(z).toBeCloseTo(up, 9);
        }
      }),
    );
  });

  it('does not change when only the base turns, and says how far it turned', () => {
    fc.assert(
      fc.property(inside(heron), fc.double({ min: -2, max: 2, noNaN: true }), (q, turn) => {
        const before = outline(heron, [0, ...q.slice(1)]);
        const after = outline(heron, [turn, ...q.slice(1)]);
        // Heron's base turns about an axis that points down: positive is clockwise from above.
        expect(after.turn).toBeCloseTo(-turn, 9);
        for (const [i, [x, z]] of before.points.entries()) {
          expect(after.points[i]![0]).toBeCloseTo(x, 9);
          expect(after.points[i]![1]).toBeCloseTo(z, 9);
        }
      }),
    );
  });

  it('keeps ahead ahead when the arm reaches over its own back', () => {
    const over = outline(heron, [0, 114, -20, 45].map(degToRad));
    expect(over.points.at(-1)![0]).toBeLessThan(0);
    expect(over.turn).toBeCloseTo(0, 12);
  });

  it('stays inside the reach that gives it its scale', () => {
    for (const model of [heron, wren, dipper]) {
      const { out, up } = reachOf(model);
      fc.assert(
        fc.property(inside(model), (q) => {
          for (const [x, z] of outline(model, q).points) {
            expect(Math.abs(x)).toBeLessThanOrEqual(out + 1e-9);
            expect(z).toBeLessThanOrEqual(up + 1e-9);
          }
        }),
      );
    }
  });

  it('stands on its pedestal: Heron’s up to the shoulder at 0.14 m', () => {
    const { points, pedestal } = outline(heron, [0.4, 1, -1, 0]);
    expect(points[pedestal - 1]).toEqual([0, expect.closeTo(SHOULDER, 9)]);
  });

  it('draws a sliding joint from where it slid: straight down by its travel', () => {
    const { points } = outline(dipper, [0.3, 0.7, -0.08, 0]);
    const from = points[3]!;
    const to = points[4]!;
    expect(to[0]).toBeCloseTo(from[0], 9);
    expect(from[1] - to[1]).toBeCloseTo(0.08, 9);
  });

  it('looks along the tool at an arm that lies in no upright plane', () => {
    // Shoulder 30°, elbow 60°: the tool at 0.2·(cos 30, sin 30) + 0.16·(cos 90, sin 90).
    const { turn, points } = outline(
      dipper,
      [30, 60, 0, 0].map((d, i) => (i === 2 ? 0 : degToRad(d))),
    );
    const x = 0.2 * Math.cos(Math.PI / 6);
    const y = 0.2 * Math.sin(Math.PI / 6) + 0.16;
    // Dipper's axes point down, so the same angles turn it to the other side.
    expect(turn).toBeCloseTo(-Math.atan2(y, x), 9);
    expect(points.at(-1)![0]).toBeCloseTo(Math.hypot(x, y), 9);
  });
});
