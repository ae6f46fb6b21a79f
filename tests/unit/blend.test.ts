import { describe, expect, it } from 'vitest';
import { heron } from '../../shared/arm/demo/heron';
import { wren } from '../../shared/arm/demo/wren';
import { type Chain, compileChain, forwardKinematics, toolLine } from '../../shared/kinematics';
import {
  alongPath,
  blendPaths,
  jointPath,
  type MotionPath,
  pathLimits,
  planPosition,
  sampleProfile,
  straightPath,
  toolPath,
} from '../../shared/motion';

const deg = (d: number) => (d * Math.PI) / 180;
type Place = [number, number, number];
const toolAt = (chain: Chain, path: MotionPath, s: number): Place => [
  ...(forwardKinematics(chain, alongPath(path, s, new Float64Array(chain.n))).position as Place),
];
const distance = (a: Place, b: Place) => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

function placesOn(chain: Chain, path: MotionPath, count = 400): Place[] {
  return Array.from({ length: count + 1 }, (_, k) => toolAt(chain, path, (path.length * k) / count));
}
function timeAlone(chain: Chain, path: MotionPath, ceiling: number): number {
  const limits = pathLimits(chain, path, { fraction: ceiling, pointSpeed: 0.25 });
  return planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits).duration;
}

/** Up, then across: two straight lines of Wren's tool with a square corner between them. */
function square() {
  const chain = compileChain(wren);
  const from = [0.2, deg(95), deg(-110), 0.3, deg(-50), 0.2];
  const first = toolPath(chain, from, toolLine(chain, from, 'base', 'z', 0.06)!).path!;
  const corner = Array.from(alongPath(first, first.length, new Float64Array(6)));
  const second = toolPath(chain, corner, toolLine(chain, corner, 'base', 'y', 0.06)!).path!;
  return { chain, first, second };
}

describe('a corner that is blended', () => {
  it.each([0.005, 0.015])('leaves both lines only within %d m of the corner', (corner) => {
    const { chain, first, second } = square();
    const path = blendPaths(chain, first, second, corner)!;
    const at = toolAt(chain, first, first.length);
    const [from, to] = [toolAt(chain, first, 0), toolAt(chain, second, second.length)];
    const places = placesOn(chain, path);
    expect(distance(places[0]!, from)).toBeLessThan(1e-6);
    expect(distance(places.at(-1)!, to)).toBeLessThan(1e-6);
    let nearest = Infinity;
    for (const p of places) {
      nearest = Math.min(nearest, distance(p, at));
      if (distance(p, at) <= corner + 1e-4) continue;
      // The first line is upright, the second along y: off both of them by less than 0.1 mm.
      const offFirst = Math.hypot(p[0] - from[0], p[1] - from[1]);
      const offSecond = Math.hypot(p[0] - at[0], p[2] - at[2]);
      expect(Math.min(offFirst, offSecond)).toBeLessThan(1e-4);
    }
    // It really cuts the corner, and by less than the distance stated.
    expect(nearest).toBeGreaterThan(0.05 * corner);
    expect(nearest).toBeLessThan(corner);
  });

  it('keeps every limit of every joint, does not stand at the corner, and takes less time than two moves', () => {
    const { chain, first, second } = square();
    const ceiling = 0.25;
    const path = blendPaths(chain, first, second, 0.015, ceiling)!;
    const limits = pathLimits(chain, path, { fraction: ceiling, pointSpeed: 0.25 });
    const profile = planPosition({ position: 0, velocity: 0, acceleration: 0 }, path.length, limits);
    const dt = 0.01;
    const sent: number[][] = [];
    for (let t = 0; t < profile.duration; t += dt)
      sent.push(alongPath(path, sampleProfile(profile, t).position, new Array<number>(6)));
    let slowest = Infinity;
    for (let k = 3; k < sent.length; k++) {
      for (const [i, { limits: own }] of wren.joints.entries()) {
        const [d, c, b, a] = [sent[k]![i]!, sent[k - 1]![i]!, sent[k - 2]![i]!, sent[k - 3]![i]!];
        expect(Math.abs(d - c) / dt).toBeLessThan(own.velocity * ceiling * 1.0001);
        expect(Math.abs(d - 2 * c + b) / dt ** 2).toBeLessThan(own.acceleration * 1.0001);
        expect(Math.abs(d - 3 * c + 3 * b - a) / dt ** 3).toBeLessThan(own.jerk * 1.0001);
      }
      const t = k * dt;
      if (t > 0.3 * profile.duration && t < 0.7 * profile.duration) {
        const [p, before] = [sent[k]!, sent[k - 1]!].map(
          (q) => forwardKinematics(chain, q).position as Place,
        );
        slowest = Math.min(slowest, distance([...p!], [...before!]) / dt);
      }
    }
    expect(slowest).toBeGreaterThan(0.001);
    expect(profile.duration).toBeLessThan(
      timeAlone(chain, first, ceiling) + timeAlone(chain, second, ceiling),
    );
  });

  it('joins a joint move to a straight one', () => {
    const chain = compileChain(heron);
    const [a, b, c] = [
      [deg(-20), deg(70), deg(-90), deg(-40)],
      [deg(10), deg(65), deg(-90), deg(-40)],
      [deg(10), deg(55), deg(-90), deg(-30)],
    ];
    const first = jointPath(chain, a!, b!);
    const second = straightPath(chain, b!, c!).path!;
    const path = blendPaths(chain, first, second, 0.01)!;
    for (const [i, value] of alongPath(path, 0, new Float64Array(4)).entries())
      expect(value).toBeCloseTo(a![i]!, 9);
    for (const [i, value] of alongPath(path, path.length, new Float64Array(4)).entries())
      expect(value).toBeCloseTo(c![i]!, 6);
  });

  it('is not blended where a joint would be outside its soft limits', () => {
    const chain = compileChain(heron);
    const beyond = [deg(130), deg(70), deg(-90), deg(-40)];
    const inside = [deg(100), deg(65), deg(-90), deg(-40)];
    const on = [deg(60), deg(65), deg(-90), deg(-40)];
    expect(
      blendPaths(chain, jointPath(chain, beyond, inside), jointPath(chain, inside, on), 0.02),
    ).toBeNull();
  });

  it('refuses paths that do not meet', () => {
    const { chain, first } = square();
    expect(() => blendPaths(chain, first, first, 0.01)).toThrow(RangeError);
  });
});
