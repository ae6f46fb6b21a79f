import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, LineSegments, Mesh } from 'three';
import type { Drawing } from './drawing';
import { disposeDrawing } from './drawing';
import { useInkMaterials } from './ink-context';
import type { Marks } from './solids';

/** A drawing as it lies on the sheet: paper, outline, edges, thin lines. */
export function Drawn({ drawing, unknown = false }: { drawing: Drawing; unknown?: boolean }) {
  const materials = useInkMaterials();
  const lines = unknown ? materials.unknown : materials.known;
  const objects = useMemo(() => {
    const paper = new Mesh(drawing.paper, materials.paper);
    const outline = new Mesh(drawing.outline, lines.outline);
    const edges = new Mesh(ribbons(drawing.edges), lines.edge);
    const marks = unknown
      ? []
      : (['thin', 'centre'] as const).flatMap((kind) => {
          const of = drawing.marks.filter((mark) => mark.kind === kind);
          return of.length > 0 ? [new LineSegments(markGeometry(of), materials[kind])] : [];
        });
    return [paper, outline, edges, ...marks];
  }, [drawing, lines, materials, unknown]);
  useEffect(
    () => () => {
      // The first two lie in the drawing and go with it.
      for (const object of objects.slice(2)) object.geometry.dispose();
    },
    [objects],
  );
  useEffect(() => () => disposeDrawing(drawing), [drawing]);
  return objects.map((object) => <primitive key={object.uuid} object={object} />);
}

/** Two triangles a segment, widened on the screen by the edge material. */
function ribbons(segments: Float32Array): BufferGeometry {
  const count = segments.length / 6;
  const position = new Float32Array(count * 12);
  const other = new Float32Array(count * 12);
  const side = new Float32Array(count * 4);
  const far = new Float32Array(count * 4);
  const index: number[] = [];
  for (let k = 0; k < count; k++) {
    const near = segments.subarray(6 * k, 6 * k + 3);
    const end = segments.subarray(6 * k + 3, 6 * k + 6);
    for (let corner = 0; corner < 4; corner++) {
      const atEnd = corner > 1;
      position.set(atEnd ? end : near, 12 * k + 3 * corner);
      other.set(atEnd ? near : end, 12 * k + 3 * corner);
      // Seen from its other end, left is right.
      side[4 * k + corner] = corner === 0 || corner === 3 ? 1 : -1;
      far[4 * k + corner] = atEnd ? 1 : 0;
    }
    const first = 4 * k;
    index.push(first, first + 1, first + 2, first + 2, first + 1, first + 3);
  }
  const geometry = new BufferGeometry().setIndex(index);
  geometry.setAttribute('position', new BufferAttribute(position, 3));
  geometry.setAttribute('other', new BufferAttribute(other, 3));
  geometry.setAttribute('side', new BufferAttribute(side, 1));
  geometry.setAttribute('far', new BufferAttribute(far, 1));
  return geometry;
}

function markGeometry(marks: readonly Marks[]): BufferGeometry {
  const positions: number[] = [];
  const along: number[] = [];
  const lifts: number[] = [];
  for (const { segments, lift } of marks) {
    let length = 0;
    for (let i = 0; i + 1 < segments.length; i += 2) {
      const a = segments[i]!;
      const b = segments[i + 1]!;
      positions.push(...a, ...b);
      along.push(length);
      length += Math.hypot(b[0] - a[0], b[1] - a[1], b[2] - a[2]);
      along.push(length);
      lifts.push(lift, lift);
    }
  }
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(new Float32Array(positions), 3));
  geometry.setAttribute('along', new BufferAttribute(new Float32Array(along), 1));
  geometry.setAttribute('lift', new BufferAttribute(new Float32Array(lifts), 1));
  return geometry;
}
