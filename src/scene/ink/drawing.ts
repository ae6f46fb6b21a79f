import { BufferAttribute, BufferGeometry, EdgesGeometry } from 'three';
import { mergeGeometries } from 'three/addons/utils/BufferGeometryUtils.js';
import type { Marks, Point, Solid } from './solids';

/** What one rigid piece of the drawing is made of, merged: a slow machine draws five things and not fifty. */
export interface Drawing {
  /** The papers; attribute `wash` tells 0 round, 1 flat, 2 dark. */
  paper: BufferGeometry;
  /** The same solids with an `outward` direction at every corner, along which their outline grows. */
  outline: BufferGeometry;
  /** Ink along sharp edges: x, y, z of both ends in turn. */
  edges: Float32Array;
  marks: readonly Marks[];
}

const WASH: Record<Solid['fill'], number> = { round: 0, flat: 1, dark: 2 };
/** Faces that meet at less than this, degrees, are one round surface. */
const SHARP_DEG = 40;

export function draw(solids: readonly Solid[], marks: readonly Marks[] = []): Drawing {
  const papers: BufferGeometry[] = [];
  const outlines: BufferGeometry[] = [];
  const edges: number[] = [];
  for (const { geometry, fill } of solids) {
    const sharp = new EdgesGeometry(geometry, SHARP_DEG);
    edges.push(...(sharp.getAttribute('position').array as Float32Array));
    sharp.dispose();
    const plain = geometry.index ? geometry.toNonIndexed() : geometry.clone();
    plain.deleteAttribute('uv');
    const count = plain.getAttribute('position').count;
    plain.setAttribute('wash', new BufferAttribute(new Float32Array(count).fill(WASH[fill]), 1));
    papers.push(plain);
    outlines.push(withOutward(plain));
    geometry.dispose();
  }
  return {
    paper: papers.length > 0 ? mergeGeometries(papers) : new BufferGeometry(),
    outline: outlines.length > 0 ? mergeGeometries(outlines) : new BufferGeometry(),
    edges: new Float32Array(edges),
    marks,
  };
}

/** At every corner the mean of its faces' different normals, so that the outline stays closed around corners. */
function withOutward(plain: BufferGeometry): BufferGeometry {
  const position = plain.getAttribute('position');
  const normal = plain.getAttribute('normal');
  const key = (x: number, y: number, z: number) =>
    `${Math.round(x * 1e6)},${Math.round(y * 1e6)},${Math.round(z * 1e6)}`;
  const corners = new Map<string, Map<string, Point>>();
  const keys: string[] = [];
  for (let i = 0; i < position.count; i++) {
    const corner = key(position.getX(i), position.getY(i), position.getZ(i));
    keys.push(corner);
    const n: Point = [normal.getX(i), normal.getY(i), normal.getZ(i)];
    const known = corners.get(corner) ?? new Map<string, Point>();
    known.set(n.map((v) => Math.round(v * 1e3)).join(), n);
    corners.set(corner, known);
  }
  const outward = new Float32Array(position.count * 3);
  for (const [i, corner] of keys.entries()) {
    const sum = [0, 0, 0];
    for (const n of corners.get(corner)?.values() ?? []) for (let k = 0; k < 3; k++) sum[k]! += n[k]!;
    const length = Math.hypot(...sum) || 1;
    for (let k = 0; k < 3; k++) outward[i * 3 + k] = sum[k]! / length;
  }
  const outline = new BufferGeometry();
  outline.setAttribute('position', position.clone());
  outline.setAttribute('outward', new BufferAttribute(outward, 3));
  return outline;
}

export function disposeDrawing(drawing: Drawing): void {
  drawing.paper.dispose();
  drawing.outline.dispose();
}
