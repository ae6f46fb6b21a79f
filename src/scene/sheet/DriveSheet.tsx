import { useFrame } from '@react-three/fiber';
import { type RefObject, useMemo, useRef } from 'react';
import { OrthographicCamera, Vector3 } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { figure, shownValue } from '../../../shared/arm/units';
import { compileChain } from '../../../shared/kinematics';
import { turnsAcross } from '../arm/proportions';
import { LEAST_SWEEP } from '../arm/Sweep';
import type { SceneSample, SceneSource } from '../source';
import { dimensions } from './dimensions';
import type { SheetElements } from './SheetLines';
import { skeleton } from './skeleton';
import { type Project, thinArm } from './thin-arm';
import { emptyTrace, extendTrace } from './trace';

/** Writes the lines over the drawing anew with every picture, from the same sample and the same eye. */
export function DriveSheet({
  model,
  source,
  known,
  showTruth,
  elements,
}: {
  model: ArmModel;
  source: SceneSource;
  known: boolean;
  showTruth: boolean;
  elements: RefObject<SheetElements>;
}) {
  const chain = useMemo(() => compileChain(model), [model]);
  const trace = useRef(emptyTrace());
  const probe = useMemo(() => new Vector3(), []);

  useFrame(({ camera, size }) => {
    const sample = source.sample();
    const on = elements.current;
    if (!(camera instanceof OrthographicCamera) || !on.trace) return;
    // The rig may just have moved the camera in this same picture.
    camera.updateMatrixWorld();
    const project: Project = (p) => {
      probe.set(p[0], p[1], p[2]).project(camera);
      return [((probe.x + 1) / 2) * size.width, ((1 - probe.y) / 2) * size.height];
    };
    if (!sample || sample.q.length !== chain.n) {
      for (const element of [on.trace, on.target, on.truth]) write(element, '');
      for (const group of [on.dims, on.note]) show(group, false);
      return;
    }
    const thin = (q: readonly number[] | undefined) =>
      q && q.length === chain.n ? thinArm(model, chain, q, project, camera.zoom) : '';
    write(on.target, thin(sample.target));
    write(on.truth, showTruth ? thin(sample.truth) : '');
    if (known && sample.tool) {
      extendTrace(trace.current, sample.t, sample.tool.position);
      writeDimensions(on, model, sample.tool.position, project);
    } else {
      trace.current = emptyTrace();
      show(on.dims, false);
    }
    write(on.trace, polyline(trace.current.places, project));
    writeNote(on, model, sample, project, (q) => skeleton(chain, q));
  });
  return null;
}

function write(element: Element | null, path: string): void {
  if (element && element.getAttribute('d') !== path) element.setAttribute('d', path);
}
function show(element: SVGElement | null, shown: boolean): void {
  if (element) element.style.display = shown ? '' : 'none';
}
function say(element: Element | null, text: string): void {
  if (element && element.textContent !== text) element.textContent = text;
}

function polyline(places: readonly (readonly [number, number, number])[], project: Project): string {
  return places
    .map((place, k) => {
      const [x, y] = project(place);
      return `${k === 0 ? 'M' : 'L'}${x.toFixed(1)} ${y.toFixed(1)}`;
    })
    .join('');
}

function writeDimensions(
  on: SheetElements,
  model: ArmModel,
  tool: readonly [number, number, number],
  project: Project,
): void {
  const base = model.joints[0]!.origin.xyz;
  const drawn = dimensions(base, tool, project);
  show(on.dims, true);
  write(on.dimLines, drawn.lines);
  write(on.arrows, drawn.arrows);
  write(on.plumb, drawn.up ? drawn.plumb : '');
  show(on.up, drawn.up !== null);
  if (drawn.up) {
    on.up?.setAttribute('transform', `translate(${drawn.up[0].toFixed(1)} ${drawn.up[1].toFixed(1)})`);
    say(on.upFigure, figure(tool[2] * 1000, 0));
  }
  show(on.out, drawn.out !== null);
  if (drawn.out) {
    on.out?.setAttribute('x', drawn.out[0].toFixed(1));
    on.out?.setAttribute('y', (drawn.out[1] + 4).toFixed(1));
    say(on.outFigure, figure(Math.hypot(tool[0] - base[0], tool[1] - base[1]) * 1000, 0));
  }
}

/** What the stopping shadow says, about the joint that would still travel farthest for its range. */
function writeNote(
  on: SheetElements,
  model: ArmModel,
  sample: SceneSample,
  project: Project,
  placesAt: (q: readonly number[]) => [number, number, number][],
): void {
  let most = -1;
  let share = 0;
  for (const [i, joint] of model.joints.entries()) {
    const travel = Math.abs((sample.stopAt[i] ?? sample.q[i]!) - sample.q[i]!);
    const part = travel / (joint.limits.upper - joint.limits.lower);
    if (travel > LEAST_SWEEP && part > share) {
      most = i;
      share = part;
    }
  }
  const joint = model.joints[most];
  show(on.note, joint !== undefined);
  if (!joint) return;
  const travel = sample.stopAt[most]! - sample.q[most]!;
  say(on.noteFigure, shownValue(joint.type, Math.abs(travel)));
  say(on.noteJoint, `${joint.name.toLowerCase()}, if you let go now`);
  const halfWay = sample.q.map((value, i) => (i === most ? value + travel * 0.7 : value));
  const places = placesAt(halfWay);
  const tip = places.at(-1)!;
  const a = places[most]!;
  const b = turnsAcross(joint) ? places[most + 1]! : ([tip[0], tip[1], 0.001] as const);
  const at = project([a[0] + (b[0] - a[0]) * 0.6, a[1] + (b[1] - a[1]) * 0.6, a[2] + (b[2] - a[2]) * 0.6]);
  write(on.lead, `M20 46H92L${at[0].toFixed(1)} ${at[1].toFixed(1)}`);
}
