import { useMemo } from 'react';
import type { ArmModel } from '../../shared/arm/model';
import { type Outline, outline, reachOf, type SidePoint } from './silhouette-outline';

/** Picture sizes: a strip card, a pose card, the comparison. px; `base` is where the base's axis stands. */
const SIZES = {
  small: { width: 118, height: 82, ground: 74, base: 26, dial: true },
  card: { width: 118, height: 104, ground: 96, base: 28, dial: true },
  large: { width: 214, height: 176, ground: 168, base: 58, dial: false },
} as const;
const MARGIN = 5;

/**
 * A pose drawn to scale from forward kinematics: solid ink for where the arm is (or was captured), a blue ghost
 * for where it is meant to go, a small dial for the turn of the base. Decorative: the words stand beside it.
 */
export function Silhouette({
  model,
  q,
  gripper = null,
  ghost,
  ghostGripper = null,
  size = 'small',
}: {
  model: ArmModel;
  /** Null where nothing is known to draw. */
  q: readonly number[] | null;
  /** 0 to 1. */
  gripper?: number | null;
  ghost?: readonly number[];
  ghostGripper?: number | null;
  size?: keyof typeof SIZES;
}) {
  const solid = useMemo(() => (q ? outline(model, q) : null), [model, q]);
  const meant = useMemo(() => (ghost ? outline(model, ghost) : null), [model, ghost]);
  const { width, height, ground, base, dial } = SIZES[size];
  const reach = reachOf(model);
  const scale = Math.min((width - base - MARGIN) / reach.out, (ground - MARGIN) / reach.up);
  const place = ([out, up]: SidePoint): SidePoint => [base + out * scale, ground - up * scale];
  const shown = solid ?? meant;
  const pedestalTop = shown ? place(shown.points[shown.pedestal - 1]!)[1] : ground;
  return (
    <svg className="sil" viewBox={`0 0 ${width} ${height}`} width={width} height={height} aria-hidden="true">
      <path className="l" d={`M2 ${ground}H${width - 2}`} />
      <path
        className="b"
        d={`M${base - 14} ${ground}v-4h5.6L${base - 5} ${round(pedestalTop)}h10L${base + 8.4} ${ground - 4}h5.6v4z`}
      />
      {solid && <Limbs outline={solid} place={place} opening={gripper} />}
      {meant && <Limbs outline={meant} place={place} opening={ghostGripper} ghost />}
      {dial && solid && <Dial turn={solid.turn} x={width - 15} />}
    </svg>
  );
}

/** Tubes, joint circles and the fingers. */
function Limbs({
  outline: { points, joints, pedestal },
  place,
  opening,
  ghost = false,
}: {
  outline: Outline;
  place: (point: SidePoint) => SidePoint;
  opening: number | null;
  ghost?: boolean;
}) {
  const at = points.map(place);
  const tip = at.at(-1)!;
  const wrist = at.at(-2)!;
  const far = Math.hypot(tip[0] - wrist[0], tip[1] - wrist[1]);
  const along: SidePoint = far > 0 ? [(tip[0] - wrist[0]) / far, (tip[1] - wrist[1]) / far] : [0, 1];
  const finger = opening === null ? 0 : Math.min(7, far * 0.7);
  const palm: SidePoint = [tip[0] - along[0] * finger, tip[1] - along[1] * finger];
  const tubes = at.slice(pedestal - 1, -1);
  const circles = joints.filter((i) => i >= pedestal - 1).map((i) => at[i]!);
  return (
    <>
      <path className={ghost ? 'gh' : 't'} d={pathOf(tubes)} />
      <path className={ghost ? 'gh' : 't2'} d={pathOf([wrist, palm])} />
      {opening !== null && (
        <path
          className={ghost ? 'gh' : 'w'}
          style={ghost ? { strokeDasharray: 'none' } : undefined}
          d={fingers(palm, along, finger, 1.2 + 2.4 * opening)}
        />
      )}
      {circles.map(([x, y], i) => (
        <circle
          key={i}
          className={ghost ? 'gho' : 'o'}
          cx={round(x)}
          cy={round(y)}
          r={ghost || i > 1 ? 3 : 3.8}
        />
      ))}
    </>
  );
}

/** Two fingers of a length from the palm, half a gap to each side. */
function fingers(palm: SidePoint, along: SidePoint, length: number, half: number): string {
  const side = (sign: 1 | -1): SidePoint => [
    palm[0] - along[1] * half * sign,
    palm[1] + along[0] * half * sign,
  ];
  const end = ([x, y]: SidePoint): SidePoint => [x + along[0] * length, y + along[1] * length];
  return pathOf([end(side(1)), side(1), side(-1), end(side(-1))]);
}

/** The base seen from above: up is ahead, to the left is left. */
function Dial({ turn, x }: { turn: number; x: number }) {
  return (
    <>
      <circle className="a" cx={x} cy="15" r="10" />
      <path
        className="w"
        d={`M${x} 15L${round(x - 10 * Math.sin(turn))} ${round(15 - 10 * Math.cos(turn))}`}
      />
      <circle cx={x} cy="15" r="2.2" className="b" />
    </>
  );
}

const pathOf = (points: readonly SidePoint[]) =>
  points.map((point, i) => `${i ? 'L' : 'M'}${point.map(round).join(' ')}`).join('');
const round = (value: number) => Math.round(value * 10) / 10;
