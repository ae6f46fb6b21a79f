import { useEffect, useMemo } from 'react';
import { BufferAttribute, BufferGeometry, LineSegments, Mesh } from 'three';
import { LineSegments2 } from 'three/addons/lines/LineSegments2.js';
import { LineSegmentsGeometry } from 'three/addons/lines/LineSegmentsGeometry.js';
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
    const edges = new LineSegments2(new LineSegmentsGeometry().setPositions(drawing.edges), lines.edge);
    edges.computeLineDistances();
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
