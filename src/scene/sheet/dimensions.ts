import type { Project } from './thin-arm';

type Vec = readonly [number, number, number];
type Px = readonly [number, number];

const n = (value: number) => value.toFixed(1);
const line = (a: Px, b: Px) => `M${n(a[0])} ${n(a[1])}L${n(b[0])} ${n(b[1])}`;
const length = (a: Px, b: Px) => Math.hypot(b[0] - a[0], b[1] - a[1]);
const between = (a: Px, b: Px, share: number): Px => [
  a[0] + (b[0] - a[0]) * share,
  a[1] + (b[1] - a[1]) * share,
];

/** Shorter on the sheet than this, px, a dimension cannot be read and is left out. */
const LEAST_UP_PX = 24;
const LEAST_OUT_PX = 70;
/** How far beside what they measure the dimension lines stand, m. */
const OUT_BESIDE_M = 0.075;
const UP_BESIDE_M = 0.06;

export interface Dimensions {
  /** SVG paths: thin lines, filled arrowheads, the plumb line below the tool point. */
  lines: string;
  arrows: string;
  plumb: string;
  /** Where the figures go, or null where the dimension is too short from here. */
  up: Px | null;
  out: Px | null;
}

/** How high the tool point is over the bench and how far out from the base's axis, dimensioned as on a drawing. */
export function dimensions(base: Vec, tool: Vec, project: Project): Dimensions {
  const lines: string[] = [];
  const arrows: string[] = [];
  const onBench: Vec = [tool[0], tool[1], 0];
  const foot: Vec = [base[0], base[1], 0];
  const reach = Math.hypot(tool[0] - base[0], tool[1] - base[1]);
  const way: Px = reach > 1e-6 ? [(tool[0] - base[0]) / reach, (tool[1] - base[1]) / reach] : [1, 0];

  const measure = (from: Vec, to: Vec, beside: Vec): Px[] => {
    const offset = (p: Vec, share: number): Vec => [
      p[0] + beside[0] * share,
      p[1] + beside[1] * share,
      p[2] + beside[2] * share,
    ];
    const a = project(offset(from, 1));
    const b = project(offset(to, 1));
    lines.push(line(project(offset(from, 0.14)), project(offset(from, 1.14))));
    lines.push(line(project(offset(to, 0.14)), project(offset(to, 1.14))));
    lines.push(line(a, b));
    arrows.push(arrowhead(a, b), arrowhead(b, a));
    return [a, b];
  };

  let up: Px | null = null;
  if (length(project(onBench), project(tool)) >= LEAST_UP_PX) {
    const [low, high] = measure(onBench, tool, [way[0] * UP_BESIDE_M, way[1] * UP_BESIDE_M, 0]);
    const middle = between(low!, high!, 0.5);
    up = [middle[0] + 8, middle[1]];
  }
  let out: Px | null = null;
  if (length(project(foot), project(onBench)) >= LEAST_OUT_PX) {
    out = between(...(measure(foot, onBench, besideOut(foot, way, project)) as [Px, Px]), 0.32);
  }
  return {
    lines: lines.join(''),
    arrows: arrows.join(''),
    plumb: line(project(onBench), project(tool)),
    up,
    out,
  };
}

/** On the bench, on the side nearer to the eye; from the side, where that would fall onto the line, below the bench. */
function besideOut(foot: Vec, way: Px, project: Project): Vec {
  const flat: Vec = [way[1] * OUT_BESIDE_M, -way[0] * OUT_BESIDE_M, 0];
  const at = project(foot);
  const near = project([foot[0] + flat[0], foot[1] + flat[1], 0]);
  const far = project([foot[0] - flat[0], foot[1] - flat[1], 0]);
  if (Math.abs(near[1] - far[1]) < 0.35 * length(at, project([foot[0], foot[1], OUT_BESIDE_M])))
    return [0, 0, -0.045];
  return near[1] >= far[1] ? flat : [-flat[0], -flat[1], 0];
}

/** A slim head at `tip`, pointing away from `from`. */
function arrowhead(tip: Px, from: Px): string {
  const size = length(tip, from);
  if (size < 1) return '';
  const x = (tip[0] - from[0]) / size;
  const y = (tip[1] - from[1]) / size;
  const back: Px = [tip[0] - x * 8, tip[1] - y * 8];
  return `M${n(tip[0])} ${n(tip[1])}L${n(back[0] - y * 3)} ${n(back[1] + x * 3)}L${n(back[0] + y * 3)} ${n(back[1] - x * 3)}Z`;
}
