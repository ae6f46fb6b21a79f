import { Vector3 } from 'three';
import type { ArmModel, Joint } from '../../../shared/arm/model';
import { block, cheek, type Marks, type Point, ring, rod, type Solid } from '../ink/solids';
import { type Fork, forkOf, halfWidth, hubOf, sectionDirections, turnsAcross, unit } from './proportions';

/** What is drawn in one link's frame: the link, the hub it turns on and what holds the next joint. */
export interface Pieces {
  solids: Solid[];
  marks: Marks[];
}

const point = (v: Vector3): Point => [v.x, v.y, v.z];

export function linkPieces(model: ArmModel, index: number): Pieces {
  const joint = model.joints[index]!;
  const before = model.joints[index - 1];
  const next = model.joints[index + 1];
  const pieces: Pieces = { solids: [], marks: [] };
  const holder = before ? forkOf(before, joint) : null;
  const fork = forkOf(joint, next);
  if (fork) addFork(pieces, fork, next!, model, index);
  else addBody(pieces, joint, next);
  if (turnsAcross(joint)) addHub(pieces, joint, holder);
  else if (joint.type === 'revolute' && !fork) addCollar(pieces, joint);
  if (joint.type === 'prismatic') addQuill(pieces, joint);
  if (next) addServo(pieces, joint, next);
  return pieces;
}

/** The link itself, from its joint to its far end. */
function addBody(pieces: Pieces, joint: Joint, next: Joint | undefined): void {
  const { shape, end } = joint.link;
  const far = new Vector3(...end);
  const length = far.length();
  if (length < 1e-4) return;
  const along = far.clone().normalize();
  if (shape.kind === 'box') {
    const { across, height } = sectionDirections(along);
    const middle = far.clone().multiplyScalar(0.5);
    pieces.solids.push(block(point(middle), [length, shape.width, shape.height], [along, across, height]));
    return;
  }
  const radius = halfWidth(shape);
  pieces.solids.push(rod([0, 0, 0], end, radius));
  const from = along.clone().multiplyScalar(turnsAcross(joint) ? radius * 2.1 : radius * 0.6);
  const to = far.clone().addScaledVector(along, next && turnsAcross(next) ? -radius * 2.1 : -radius * 0.6);
  if (from.distanceTo(to) > 0.03 && from.dot(along) < to.dot(along))
    pieces.marks.push({ segments: [point(from), point(to)], lift: radius * 1.1, kind: 'centre' });
}

/** Two plates on a turntable, and the motor of the joint they hold behind one of them. */
function addFork(pieces: Pieces, fork: Fork, next: Joint, model: ArmModel, index: number): void {
  const { along, length, width, depth, plate, axis } = fork;
  const hub = hubOf(next, fork);
  const round = Math.max(hub.radius * 1.12, depth * 0.4);
  const foot = Math.max(depth, round * 2.2) * 1.12;
  const table = index === 0 ? Math.hypot(width, foot) * 0.52 : Math.max(width, foot) / 2;
  pieces.solids.push(rod([0, 0, 0], point(along.clone().multiplyScalar(plate)), table));
  const seat = along.clone().multiplyScalar(plate);
  const head = along.clone().multiplyScalar(length);
  for (const side of [1, -1]) {
    const out = axis.clone().multiplyScalar((side * (width - plate)) / 2);
    pieces.solids.push(
      cheek(point(seat.clone().add(out)), point(head.clone().add(out)), axis, foot, round, plate),
    );
    // The bearing's cap, proud of the plate.
    const face = head.clone().addScaledVector(axis, (side * width) / 2);
    pieces.solids.push(
      rod(point(face), point(face.clone().addScaledVector(axis, side * 0.003)), hub.radius * 0.62),
    );
    const proud = face.clone().addScaledVector(axis, side * 0.0032);
    pieces.marks.push({ segments: ring(point(proud), axis, hub.radius * 0.22), lift: 0.001, kind: 'thin' });
  }
  if (next.drive.kind !== 'stepper' || !model.joints[index + 1]) return;
  // A square motor on the far side, as long as its torque asks for.
  const size = next.drive.holdingTorque < 0.1 ? 0.028 : 0.042;
  const deep = 0.014 + 0.06 * Math.min(0.6, next.drive.holdingTorque);
  const middle = head.clone().addScaledVector(axis, -(width / 2 + deep / 2 + 0.0005));
  const side = new Vector3().crossVectors(along, axis);
  pieces.solids.push(block(point(middle), [size, size, deep], [side, along, axis]));
}

/** The hub across a joint, with its circles and centre lines on both faces. */
function addHub(pieces: Pieces, joint: Joint, holder: Fork | null): void {
  const axis = unit(joint.axis);
  const { radius, length } = hubOf(joint, holder);
  const near = axis.clone().multiplyScalar(length / 2);
  pieces.solids.push(rod(point(near.clone().negate()), point(near), radius));
  if (holder) return;
  const along = new Vector3(...joint.link.end);
  along.addScaledVector(axis, -along.dot(axis)).normalize();
  if (along.lengthSq() < 0.5) along.set(1, 0, 0);
  const across = new Vector3().crossVectors(axis, along);
  for (const side of [1, -1]) {
    const face = axis.clone().multiplyScalar(side * (length / 2 + 0.0002));
    const reach = radius * 1.3;
    const line = (way: Vector3): Point[] => [
      point(face.clone().addScaledVector(way, -reach)),
      point(face.clone().addScaledVector(way, reach)),
    ];
    pieces.marks.push(
      { segments: ring(point(face), axis, radius * 0.66), lift: 0.0006, kind: 'thin' },
      { segments: ring(point(face), axis, radius * 0.24), lift: 0.0006, kind: 'thin' },
      { segments: [...line(along), ...line(across)], lift: 0.0006, kind: 'centre' },
    );
  }
}

/** A collar where a link turns about itself. */
function addCollar(pieces: Pieces, joint: Joint): void {
  const axis = unit(joint.axis);
  const radius = halfWidth(joint.link.shape) * 1.35;
  const near = axis.clone().multiplyScalar(0.007);
  pieces.solids.push(rod(point(near.clone().negate()), point(near), radius));
}

/** The rest of a sliding bar, on the other side of its sleeve: as much as it can slide out. */
function addQuill(pieces: Pieces, joint: Joint): void {
  const axis = unit(joint.axis);
  const radius = halfWidth(joint.link.shape);
  const { lower, upper } = joint.hardRange;
  const hidden = Math.abs(lower) > Math.abs(upper) ? -lower : -upper;
  if (Math.abs(hidden) < 0.005) return;
  const top = axis.clone().multiplyScalar(hidden + Math.sign(hidden) * 0.02);
  pieces.solids.push(rod([0, 0, 0], point(top), radius * 0.8));
  pieces.solids.push(
    rod(point(top), point(top.clone().addScaledVector(axis, Math.sign(hidden) * 0.008)), radius * 1.8),
  );
}

/** What is fixed to this link for the next joint: a hobby servo beside its hub, or a slide's sleeve. */
function addServo(pieces: Pieces, joint: Joint, next: Joint): void {
  const straight = next.origin.rpy.every((angle) => Math.abs(angle) < 1e-9);
  if (!straight) return;
  const at = new Vector3(...next.origin.xyz);
  const axis = unit(next.axis);
  if (next.type === 'prismatic') {
    const half = axis.clone().multiplyScalar(0.022);
    const radius = halfWidth(next.link.shape) * 2.4;
    pieces.solids.push(rod(point(at.clone().sub(half)), point(at.clone().add(half)), radius));
    return;
  }
  if (next.drive.kind !== 'servo' || !turnsAcross(next)) return;
  const hub = hubOf(next, forkOf(joint, next));
  const along = new Vector3(...joint.link.end).normalize();
  if (Math.abs(along.dot(axis)) > 0.3) return;
  const across = new Vector3().crossVectors(axis, along);
  // The usual 40 × 20 × 38 mm case, its shaft near one end.
  const middle = at
    .clone()
    .addScaledVector(axis, -(hub.length / 2 + 0.0105))
    .addScaledVector(along, -0.01);
  pieces.solids.push(block(point(middle), [0.04, 0.02, 0.02], [along, axis, across.negate()]));
}
