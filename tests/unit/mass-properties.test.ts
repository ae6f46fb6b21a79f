import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { massProperties, withPointMass } from '../../shared/arm/mass-properties';
import type { LinkShape, Vec3 } from '../../shared/arm/model';

/** Second moments of a cloud of equal point masses about its own centre, the slow and independent way. */
function ofCloud(points: readonly Vec3[], mass: number) {
  const m = mass / points.length;
  const com = [0, 1, 2].map((k) => points.reduce((sum, p) => sum + p[k]!, 0) / points.length) as Vec3;
  let [ixx, iyy, izz, ixy, ixz, iyz] = [0, 0, 0, 0, 0, 0];
  for (const p of points) {
    const [x, y, z] = p.map((v, k) => v - com[k]!) as Vec3;
    ixx += m * (y * y + z * z);
    iyy += m * (x * x + z * z);
    izz += m * (x * x + y * y);
    ixy -= m * x * y;
    ixz -= m * x * z;
    iyz -= m * y * z;
  }
  return { mass, com, inertia: { ixx, iyy, izz, ixy, ixz, iyz } };
}

describe('a tube', () => {
  // Trade facts: D 25, d 21.4 mm, 0.3 m: PVC (1400) 0.05510 kg, CFRP (1600) 0.06297 kg, aluminium (2700) 0.10627 kg.
  it.each([
    ['PVC pipe', 0.0551],
    ['carbon tube', 0.06297],
    ['aluminium', 0.10627],
  ] as const)('of %s weighs %f kg', (material, mass) => {
    const tube: LinkShape = { kind: 'tube', outer: 0.025, inner: 0.0214, material };
    expect(massProperties(tube, [0.3, 0, 0]).mass).toBeCloseTo(mass, 5);
  });

  // Any mechanics text: along the axis m(ro²+ri²)/2; across m(3(ro²+ri²)+L²)/12.
  it('has the textbook’s moments about its centre, whichever way it lies', () => {
    const tube: LinkShape = { kind: 'tube', outer: 0.03, inner: 0.02, material: 'PLA' };
    const lying = massProperties(tube, [0.4, 0, 0]);
    const standing = massProperties(tube, [0, 0, -0.4]);
    const rr = 0.015 ** 2 + 0.01 ** 2;
    expect(lying.inertia.ixx).toBeCloseTo((lying.mass * rr) / 2, 15);
    expect(lying.inertia.iyy).toBeCloseTo((lying.mass * (3 * rr + 0.16)) / 12, 15);
    expect(standing.inertia.izz).toBeCloseTo(lying.inertia.ixx, 15);
    expect(standing.com).toEqual([0, 0, -0.2]);
  });

  it('lying askew has the moments of the same tube, turned: summed over many small pieces', () => {
    const end: Vec3 = [0.1, 0.2, 0.2];
    const tube: LinkShape = { kind: 'tube', outer: 0.04, inner: 0.039, material: 'steel' };
    const body = massProperties(tube, end);
    // A thin wall: a cylinder surface of radius 19.75 mm about the line.
    const axis = end.map((x) => x / 0.3) as Vec3;
    const u: Vec3 = [2 / Math.sqrt(5), -1 / Math.sqrt(5), 0];
    const w: Vec3 = [
      axis[1] * u[2] - axis[2] * u[1],
      axis[2] * u[0] - axis[0] * u[2],
      axis[0] * u[1] - axis[1] * u[0],
    ];
    const points: Vec3[] = [];
    for (let i = 0; i < 200; i++)
      for (let k = 0; k < 40; k++) {
        const a = (k / 40) * 2 * Math.PI;
        points.push(
          axis.map(
            (x, c) => x * 0.3 * ((i + 0.5) / 200) + 0.01975 * (Math.cos(a) * u[c]! + Math.sin(a) * w[c]!),
          ) as Vec3,
        );
      }
    const cloud = ofCloud(points, body.mass);
    for (const key of ['ixx', 'iyy', 'izz', 'ixy', 'ixz', 'iyz'] as const)
      expect(body.inertia[key]).toBeCloseTo(cloud.inertia[key], 6);
  });
});

describe('a link’s mass properties', () => {
  const shape = fc.oneof(
    fc.record({
      kind: fc.constant('tube' as const),
      outer: fc.double({ min: 0.011, max: 0.05, noNaN: true }),
      inner: fc.double({ min: 0, max: 0.01, noNaN: true }),
      material: fc.constant('PLA' as const),
    }),
    fc.record({
      kind: fc.constant('bar' as const),
      diameter: fc.double({ min: 0.002, max: 0.05, noNaN: true }),
      material: fc.constant('steel' as const),
    }),
    fc.record({
      kind: fc.constant('box' as const),
      width: fc.double({ min: 0.005, max: 0.1, noNaN: true }),
      height: fc.double({ min: 0.005, max: 0.1, noNaN: true }),
      material: fc.constant('aluminium' as const),
    }),
  );
  const coordinate = () => fc.double({ min: -0.5, max: 0.5, noNaN: true });

  it('are those of a real body: no moment exceeds the sum of the other two, with any motor on it', () => {
    fc.assert(
      fc.property(
        shape,
        fc.tuple(coordinate(), coordinate(), coordinate()).filter((v) => Math.hypot(...v) > 0.01),
        fc.double({ min: 0, max: 2, noNaN: true }),
        fc.tuple(coordinate(), coordinate(), coordinate()),
        (s, end, extra, at) => {
          const { ixx, iyy, izz } = withPointMass(massProperties(s, end), extra, at).inertia;
          const slack = 1e-12 + 1e-9 * (ixx + iyy + izz);
          expect(ixx).toBeLessThanOrEqual(iyy + izz + slack);
          expect(iyy).toBeLessThanOrEqual(ixx + izz + slack);
          expect(izz).toBeLessThanOrEqual(ixx + iyy + slack);
        },
      ),
    );
  });

  it('refuse a link without length and a tube thicker inside than outside', () => {
    expect(() => massProperties({ kind: 'bar', diameter: 0.01, material: 'PLA' }, [0, 0, 0])).toThrow(
      /length/,
    );
    expect(() =>
      massProperties({ kind: 'tube', outer: 0.01, inner: 0.01, material: 'PLA' }, [1, 0, 0]),
    ).toThrow(/inside/);
  });
});

describe('a motor on a link', () => {
  // Parallel axes: two point masses m1, m2 a distance d apart have m1·m2/(m1+m2)·d² about their centre.
  it('moves the centre and adds by the theorem of parallel axes', () => {
    const point = {
      mass: 2,
      com: [0, 0, 0] as Vec3,
      inertia: { ixx: 0, iyy: 0, izz: 0, ixy: 0, ixz: 0, iyz: 0 },
    };
    const pair = withPointMass(point, 1, [0, 0.3, 0.4]);
    const cloud = ofCloud(
      [
        [0, 0, 0],
        [0, 0, 0],
        [0, 0.3, 0.4],
      ],
      3,
    );
    expect(pair.mass).toBe(3);
    for (const k of [0, 1, 2]) expect(pair.com[k]).toBeCloseTo(cloud.com[k]!, 12);
    for (const key of ['ixx', 'iyy', 'izz', 'ixy', 'ixz', 'iyz'] as const)
      expect(pair.inertia[key]).toBeCloseTo(cloud.inertia[key], 12);
  });
});
