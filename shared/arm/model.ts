import { z } from 'zod';

/**
 * The arm model: what a builder tells Elbowroom about an arm. SI units throughout: m, rad, kg, N·m, s
 * (sliding joints: m, m/s, N). The kinematic core follows common robot-description practice, so
 * `compileChain` in shared/kinematics reads an ArmModel as it is.
 */
const finite = z.number().refine(Number.isFinite, 'must be a finite number');
const positive = finite.positive();
const nonNegative = finite.nonnegative();
export const Vec3 = z.tuple([finite, finite, finite]);
export type Vec3 = z.infer<typeof Vec3>;

/** Pose of one frame in another: metres, and fixed-axis roll, pitch, yaw in rad: R = Rz(y)·Ry(p)·Rx(r). */
export const Origin = z.strictObject({ xyz: Vec3, rpy: Vec3 });
export type Origin = z.infer<typeof Origin>;

/** Inertia tensor about the centre of mass, along the link frame's axes, kg·m²; ixy = −∫xy dm. */
export const Inertia = z.strictObject({
  ixx: finite,
  iyy: finite,
  izz: finite,
  ixy: finite,
  ixz: finite,
  iyz: finite,
});
/** Mass (kg), centre of mass (m) and inertia of a rigid body in the frame it is fixed to. */
export const MassProperties = z.strictObject({ mass: nonNegative, com: Vec3, inertia: Inertia });
export type MassProperties = z.infer<typeof MassProperties>;

export const MATERIAL_NAMES = [
  'carbon tube',
  'aluminium',
  'steel',
  'PVC pipe',
  'PLA',
  'PETG',
  'ABS',
] as const;

/** What a link looks like and is made of; drawn in 3D. Lengths in m. */
export const LinkShape = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('tube'),
    outer: positive,
    inner: nonNegative,
    material: z.enum(MATERIAL_NAMES),
  }),
  z.strictObject({ kind: z.literal('bar'), diameter: positive, material: z.enum(MATERIAL_NAMES) }),
  z.strictObject({
    kind: z.literal('box'),
    width: positive,
    height: positive,
    material: z.enum(MATERIAL_NAMES),
  }),
]);
export type LinkShape = z.infer<typeof LinkShape>;

/** One body, moved by its joint. `end` is the far end of the link in the link frame (m): where the next joint sits. */
export const Link = MassProperties.extend({ shape: LinkShape, end: Vec3 });
export type Link = z.infer<typeof Link>;

/** One point of a motor's torque–speed curve: rad/s and N·m at the motor shaft. */
const TorquePoint = z.strictObject({ speed: nonNegative, torque: nonNegative });

export const StepperDrive = z.strictObject({
  kind: z.literal('stepper'),
  /** Full steps per motor turn, e.g. 200. */
  stepsPerRev: z.int().min(4).max(1000),
  microsteps: z.int().min(1).max(256),
  /** Motor turns per joint turn; for a sliding joint, motor rad per metre of travel is `2π / lead`. */
  ratio: positive,
  /** Sliding joints: travel per turn after the ratio, m. */
  lead: positive.optional(),
  efficiency: positive.max(1),
  /** N·m at the motor shaft, energised and standing. */
  holdingTorque: positive,
  /** N·m at the motor shaft with the driver off. */
  detentTorque: nonNegative,
  /** kg·m² of the rotor. */
  rotorInertia: nonNegative,
  /** Largest torque at a running speed before steps are lost (pull-out), rising speed. */
  torqueCurve: z.array(TorquePoint).min(2).max(40),
  /** How this joint finds itself: a switch at an angle, or a person's eye. */
  reference: z
    .discriminatedUnion('kind', [
      z.strictObject({
        kind: z.literal('switch'),
        position: finite,
        direction: z.union([z.literal(1), z.literal(-1)]),
      }),
      z.strictObject({ kind: z.literal('none') }),
    ])
    .default({ kind: 'none' }),
});
export type StepperDrive = z.infer<typeof StepperDrive>;

export const ServoDrive = z.strictObject({
  kind: z.literal('servo'),
  /** At the servo's own shaft, N·m at the supply voltage used. */
  stallTorque: positive,
  /** No-load speed at the servo's own shaft, rad/s. */
  noLoadSpeed: positive,
  /** Servo turns per joint turn. */
  ratio: positive,
  efficiency: positive.max(1),
  /** Pulse widths in µs at the joint's hard lower and upper range. */
  pulse: z.strictObject({ atLower: positive, atUpper: positive }),
});
export type ServoDrive = z.infer<typeof ServoDrive>;
export const Drive = z.discriminatedUnion('kind', [StepperDrive, ServoDrive]);
export type Drive = z.infer<typeof Drive>;

/** How a joint's motion is drawn on its hold buttons. */
export const MOTION_PICTURES = ['turn', 'lift', 'fold', 'tilt', 'roll', 'slide'] as const;

/** The words on a joint's two hold buttons: at rest ("raise") and held ("raising"). */
export const JointWords = z.strictObject({
  picture: z.enum(MOTION_PICTURES),
  positive: z.string().min(1).max(20),
  positiveDoing: z.string().min(1).max(24),
  negative: z.string().min(1).max(20),
  negativeDoing: z.string().min(1).max(24),
});
export type JointWords = z.infer<typeof JointWords>;

/** Soft limits and the fastest the joint may ever go; rad, rad/s, rad/s², rad/s³ (or m …). */
export const JointLimits = z
  .strictObject({ lower: finite, upper: finite, velocity: positive, acceleration: positive, jerk: positive })
  .refine((l) => l.lower < l.upper, {
    message: 'the lower soft limit must be below the upper one',
    path: ['lower'],
  });
export type JointLimits = z.infer<typeof JointLimits>;

export const Joint = z
  .strictObject({
    name: z.string().trim().min(1).max(40),
    type: z.enum(['revolute', 'prismatic']),
    origin: Origin,
    axis: Vec3.refine((a) => Math.hypot(...a) > 1e-6, 'the axis must not be the zero vector'),
    limits: JointLimits,
    /** The mechanical range; the soft limits lie inside it. */
    hardRange: z.strictObject({ lower: finite, upper: finite }),
    words: JointWords,
    link: Link,
    drive: Drive,
  })
  .refine((j) => j.hardRange.lower <= j.limits.lower && j.limits.upper <= j.hardRange.upper, {
    message: 'the soft limits must lie inside the mechanical range',
    path: ['limits'],
  });
export type Joint = z.infer<typeof Joint>;

/** A two-finger gripper driven by a small servo. */
export const Gripper = z.strictObject({
  /** Widest opening between the fingers, m. */
  opening: positive,
  /** Time from closed to fully open, s. */
  travelTime: positive,
  /** Finger force at stall, N. */
  force: positive,
  mass: nonNegative,
});
export type Gripper = z.infer<typeof Gripper>;

/** A box nobody's arm may enter, or simply something standing on the bench; in the base frame, m. */
export const BenchObject = z.strictObject({
  name: z.string().trim().min(1).max(40),
  kind: z.enum(['tray', 'scale', 'box']),
  centre: Vec3,
  size: z.tuple([positive, positive, positive]),
  /** Turn about the vertical, rad. */
  yaw: finite,
});
export type BenchObject = z.infer<typeof BenchObject>;

export const ArmModel = z
  .strictObject({
    format: z.literal('elbowroom-arm'),
    version: z.literal(1),
    name: z.string().trim().min(1).max(40),
    note: z.string().max(500).default(''),
    gravity: Vec3.default([0, 0, -9.80665]),
    joints: z.array(Joint).min(1).max(8),
    /** Tool point in the last link's frame. */
    tool: Origin,
    gripper: Gripper.nullable(),
    /** What the tool carries when it is loaded, in the tool frame. */
    payload: MassProperties.nullable(),
    /** Joints in the order in which they are referenced (indices). */
    referenceOrder: z.array(z.int().nonnegative()),
    bench: z.array(BenchObject).max(20),
  })
  .superRefine((arm, context) => {
    const names = new Set(arm.joints.map((j) => j.name.toLowerCase()));
    if (names.size !== arm.joints.length)
      context.addIssue({ code: 'custom', path: ['joints'], message: 'two joints have the same name' });
    for (const index of arm.referenceOrder)
      if (index >= arm.joints.length)
        context.addIssue({
          code: 'custom',
          path: ['referenceOrder'],
          message: `there is no joint ${index + 1}`,
        });
    for (const [i, joint] of arm.joints.entries())
      if (joint.type === 'prismatic' && joint.drive.kind === 'stepper' && joint.drive.lead === undefined)
        context.addIssue({
          code: 'custom',
          path: ['joints', i, 'drive', 'lead'],
          message: 'a sliding joint needs the travel per turn of its screw or belt',
        });
  });
export type ArmModel = z.infer<typeof ArmModel>;
