import { massProperties, withPointMass } from '../mass-properties';
import type { Joint, JointWords, Link, LinkShape, ServoDrive, StepperDrive, Vec3 } from '../model';
import { degToRad } from '../units';

/** Parts the demo arms are put together from. The arms are invented; the physics of their parts is not. */

/** A motor, bearing or gripper that sits on a link: kg, and where (m, link frame). */
interface Extra {
  mass: number;
  at: Vec3;
}

export function link(shape: LinkShape, end: Vec3, extras: readonly Extra[] = []): Link {
  let body = massProperties(shape, end);
  for (const { mass, at } of extras) body = withPointMass(body, mass, at);
  return { ...body, shape, end };
}

export const carbon = (outer: number, inner: number): LinkShape => ({
  kind: 'tube',
  outer,
  inner,
  material: 'carbon tube',
});

/** A small hybrid stepper and its gearing; torques in N·m at the motor shaft. */
export function stepper(options: {
  holding: number;
  ratio: number;
  efficiency: number;
  lead?: number;
  rotorInertia?: number;
  detent?: number;
  switchAt?: number;
  switchDirection?: 1 | -1;
}): StepperDrive {
  const { holding, ratio, efficiency, lead } = options;
  return {
    kind: 'stepper',
    stepsPerRev: 200,
    microsteps: 16,
    ratio,
    ...(lead === undefined ? {} : { lead }),
    efficiency,
    holdingTorque: holding,
    detentTorque: options.detent ?? 0.05 * holding,
    rotorInertia: options.rotorInertia ?? 3.5e-6,
    // About constant up to a corner speed, then falling about as 1/speed.
    torqueCurve: [
      { speed: 0, torque: 0.96 * holding },
      { speed: 40, torque: 0.92 * holding },
      { speed: 80, torque: 0.75 * holding },
      { speed: 160, torque: 0.4 * holding },
      { speed: 300, torque: 0.18 * holding },
      { speed: 500, torque: 0 },
    ],
    reference:
      options.switchAt === undefined
        ? { kind: 'none' }
        : { kind: 'switch', position: options.switchAt, direction: options.switchDirection ?? -1 },
  };
}

export function servo(stallTorque: number, secondsPer60Deg: number): ServoDrive {
  return {
    kind: 'servo',
    stallTorque,
    noLoadSpeed: Math.PI / 3 / secondsPer60Deg,
    ratio: 1,
    efficiency: 1,
    pulse: { atLower: 600, atUpper: 2400 },
  };
}

export const WORDS = {
  // Axis down: positive turns clockwise seen from above, so that "left" stands on the left.
  turn: {
    picture: 'turn',
    positive: 'right',
    positiveDoing: 'turning right',
    negative: 'left',
    negativeDoing: 'turning left',
  },
  lift: {
    picture: 'lift',
    positive: 'raise',
    positiveDoing: 'raising',
    negative: 'lower',
    negativeDoing: 'lowering',
  },
  fold: {
    picture: 'fold',
    positive: 'unfold',
    positiveDoing: 'unfolding',
    negative: 'fold',
    negativeDoing: 'folding',
  },
  tilt: {
    picture: 'tilt',
    positive: 'tilt up',
    positiveDoing: 'tilting up',
    negative: 'tilt down',
    negativeDoing: 'tilting down',
  },
  // Axis outward along the link: positive turns clockwise for somebody who looks along it.
  roll: {
    picture: 'roll',
    positive: 'roll right',
    positiveDoing: 'rolling right',
    negative: 'roll left',
    negativeDoing: 'rolling left',
  },
  slide: {
    picture: 'slide',
    positive: 'raise',
    positiveDoing: 'raising',
    negative: 'lower',
    negativeDoing: 'lowering',
  },
} satisfies Record<string, JointWords>;

/** A turning joint with its figures in degrees: soft limits, how far the mechanics go beyond them, and speeds. */
export function turning(options: {
  name: string;
  words: JointWords;
  at: Vec3;
  axis: Vec3;
  soft: [number, number];
  beyond: number;
  /** °/s, °/s², °/s³ */
  speed: [number, number, number];
  link: Link;
  drive: Joint['drive'];
}): Joint {
  const [lower, upper] = options.soft;
  const [velocity, acceleration, jerk] = options.speed;
  return {
    name: options.name,
    type: 'revolute',
    origin: { xyz: options.at, rpy: [0, 0, 0] },
    axis: options.axis,
    limits: {
      lower: degToRad(lower),
      upper: degToRad(upper),
      velocity: degToRad(velocity),
      acceleration: degToRad(acceleration),
      jerk: degToRad(jerk),
    },
    hardRange: { lower: degToRad(lower - options.beyond), upper: degToRad(upper + options.beyond) },
    words: options.words,
    link: options.link,
    drive: options.drive,
  };
}
