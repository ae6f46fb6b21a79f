import { useEffect, useMemo } from 'react';
import {
  BufferAttribute,
  BufferGeometry,
  Group,
  LineBasicMaterial,
  LineDashedMaterial,
  LineSegments,
  Vector3,
} from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { stretchedLength } from '../arm/proportions';
import { ring } from '../ink/solids';
import { useInks } from '../inks';

const CELL_M = 0.1;

/** The bench as squared paper, the base's centre lines, and how far out the tool point can ever reach. */
export function Floor({ model }: { model: ArmModel }) {
  const inks = useInks();
  const reach = stretchedLength(model) - (model.joints[0]?.origin.xyz[2] ?? 0);
  const lines = useMemo(() => {
    const cells = Math.ceil((reach * 1.05) / CELL_M);
    const edge = cells * CELL_M;
    const grid: number[] = [];
    for (let k = -cells; k <= cells; k++) {
      const at = k * CELL_M;
      grid.push(at, -edge, 0, at, edge, 0, -edge, at, 0, edge, at, 0);
    }
    const axes = [-edge * 0.5, 0, 0, edge * 1.02, 0, 0, 0, -edge * 0.6, 0, 0, edge * 0.6, 0];
    const circle = ring([0, 0, 0], new Vector3(0, 0, 1), reach, 180).flat();
    const group = new Group();
    group.add(
      new LineSegments(points(grid, -0.0004), new LineBasicMaterial()),
      dashed(points(axes, 0), 0.022, 0.006),
      dashed(points(circle, 0), 0.004, 0.007),
    );
    return group;
  }, [reach]);
  useEffect(() => {
    const colours = [inks.grid, inks.ink3, inks.ink3];
    for (const [i, child] of lines.children.entries())
      ((child as LineSegments).material as LineBasicMaterial).color.set(colours[i]!);
  }, [lines, inks]);
  useEffect(
    () => () => {
      for (const child of lines.children as LineSegments[]) {
        child.geometry.dispose();
        (child.material as LineBasicMaterial).dispose();
      }
    },
    [lines],
  );
  return <primitive object={lines} />;
}

function points(list: readonly number[], up: number): BufferGeometry {
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(new Float32Array(list), 3));
  return geometry.translate(0, 0, up);
}

function dashed(geometry: BufferGeometry, dashSize: number, gapSize: number): LineSegments {
  const line = new LineSegments(geometry, new LineDashedMaterial({ dashSize, gapSize }));
  return line.computeLineDistances();
}
