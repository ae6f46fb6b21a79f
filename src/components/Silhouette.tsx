import { useMemo } from 'react';
import type { ArmModel } from '../../shared/arm/model';
import { compileChain, forwardKinematics, linkFrames } from '../../shared/kinematics';

const WIDTH = 118;
const HEIGHT = 82;
const GROUND = 74;
const BASE_X = 26;

interface Outline {
  points: [number, number][];
  /** Turn of the arm seen from above, rad; 0 = ahead. */
  turn: number;
}

/** The arm from its side, turned into the picture: distance out and height, m. */
export function outline(model: ArmModel, q: readonly number[]): Outline {
  const chain = compileChain(model);
  const tool = forwardKinematics(chain, q).position;
  const turn = Math.atan2(tool[1], tool[0]);
  const places = [[0, 0, 0], ...linkFrames(chain, q).map((frame) => frame.position), tool];
  return {
    points: places.map(([x, y, z]) => [(x ?? 0) * Math.cos(turn) + (y ?? 0) * Math.sin(turn), z ?? 0]),
    turn,
  };
}

/** Longest the arm can be, m: the scale that keeps all its silhouettes comparable. */
function reachOf(model: ArmModel): number {
  return model.joints.reduce(
    (sum, joint) => sum + Math.hypot(...joint.origin.xyz),
    Math.hypot(...model.tool.xyz),
  );
}

/** A pose drawn to scale, with a small dial for the turn of the base. Decorative: the card has the words. */
export function Silhouette({
  model,
  q,
  ghost,
}: {
  model: ArmModel;
  q: readonly number[];
  ghost?: readonly number[];
}) {
  const drawn = useMemo(() => outline(model, q), [model, q]);
  const other = useMemo(() => (ghost ? outline(model, ghost) : null), [model, ghost]);
  const scale = 92 / reachOf(model);
  const place = ([out, up]: [number, number]): [number, number] => [
    BASE_X + out * scale,
    GROUND - up * scale,
  ];
  const path = (points: [number, number][]) =>
    points.map((p, i) => `${i ? 'L' : 'M'}${place(p).map(round).join(' ')}`).join('');
  const joints = drawn.points.slice(1, -1).map(place);
  const end = place(drawn.points.at(-1)!);
  return (
    <svg className="sil" viewBox={`0 0 ${WIDTH} ${HEIGHT}`} width={WIDTH} height={HEIGHT} aria-hidden="true">
      <path className="l" d={`M2 ${GROUND}H${WIDTH - 2}`} />
      <path className="b" d={`M${BASE_X - 12} ${GROUND}v-4h5l2-10h10l2 10h5v4z`} />
      {other && <path className="gh" d={path(other.points)} />}
      <path className="t" d={path(drawn.points)} />
      <path
        className="w"
        d={`M${round(end[0] - 2.5)} ${round(end[1])}v5M${round(end[0] + 2.5)} ${round(end[1])}v5`}
      />
      {joints.map(([x, y], i) => (
        <circle key={i} className="o" cx={round(x)} cy={round(y)} r={i < 2 ? 3.8 : 3} />
      ))}
      <circle className="a" cx="103" cy="15" r="10" />
      <path
        className="w"
        d={`M103 15L${round(103 - 10 * Math.sin(drawn.turn))} ${round(15 - 10 * Math.cos(drawn.turn))}`}
      />
      <circle cx="103" cy="15" r="2.2" className="b" />
    </svg>
  );
}

const round = (x: number) => Math.round(x * 10) / 10;
