import { useFrame } from '@react-three/fiber';
import { useEffect, useMemo, useRef } from 'react';
import { BufferAttribute, BufferGeometry, Color, DoubleSide, Mesh, ShaderMaterial } from 'three';
import type { ArmModel } from '../../../shared/arm/model';
import { useInks } from '../inks';
import type { SceneSource } from '../source';
import { SWEEP_STEPS, sweepCorners } from './sweep-shape';

/** Shorter than this nothing is drawn, rad or m. */
export const LEAST_SWEEP = 0.004;

const VERTEX = /* glsl */ `
  attribute vec2 place;
  varying vec2 vPlace;
  void main() { vPlace = place; gl_Position = projectionMatrix * modelViewMatrix * vec4(position, 1.0); }`;
// The sheet's stripes, and its dark edge 1.6 px wide around them.
const FRAGMENT = /* glsl */ `
  uniform vec3 stripe; uniform vec3 stripe2; uniform vec3 edge; uniform float pixelRatio;
  varying vec2 vPlace;
  void main() {
    vec2 px = min(vPlace, 1.0 - vPlace) / max(fwidth(vPlace), vec2(1e-6)) / pixelRatio;
    vec2 at = gl_FragCoord.xy / pixelRatio;
    float across = mod(at.x * 0.906 - at.y * 0.423, 9.0);
    vec3 colour = min(px.x, px.y) < 1.6 ? edge : across < 4.5 ? stripe : stripe2;
    gl_FragColor = vec4(colour, 1.0);
    #include <colorspace_fragment>
  }`;

/** A strip of quads between the inner and outer corners of each step. */
function strip(): BufferGeometry {
  const corners = (SWEEP_STEPS + 1) * 2;
  const place = new Float32Array(corners * 2);
  const index: number[] = [];
  for (let k = 0; k <= SWEEP_STEPS; k++) place.set([0, k / SWEEP_STEPS, 1, k / SWEEP_STEPS], k * 4);
  for (let k = 0; k < SWEEP_STEPS; k++) {
    const at = 2 * k;
    index.push(at, at + 1, at + 3, at, at + 3, at + 2);
  }
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(new Float32Array(corners * 3), 3));
  geometry.setAttribute('place', new BufferAttribute(place, 2));
  geometry.setIndex(index);
  return geometry;
}

/** The stopping shadow in 3D, beside the link that moves. */
export function Sweep({ model, index, source }: { model: ArmModel; index: number; source: SceneSource }) {
  const inks = useInks();
  const mesh = useMemo(() => {
    const material = new ShaderMaterial({
      vertexShader: VERTEX,
      fragmentShader: FRAGMENT,
      side: DoubleSide,
      uniforms: {
        stripe: { value: new Color() },
        stripe2: { value: new Color() },
        edge: { value: new Color() },
        pixelRatio: { value: 1 },
      },
    });
    const made = new Mesh(strip(), material);
    made.frustumCulled = false;
    // Flat and empty in the first picture: the shader is ready before the first movement, which must not wait for it.
    made.visible = true;
    return made;
  }, []);
  useEffect(() => {
    const uniforms = mesh.material.uniforms as Record<string, { value: Color }>;
    uniforms.stripe!.value.set(inks.move);
    uniforms.stripe2!.value.set(inks.move2);
    uniforms.edge!.value.set(inks.moveEdge);
  }, [mesh, inks]);
  useEffect(
    () => () => {
      mesh.geometry.dispose();
      mesh.material.dispose();
    },
    [mesh],
  );
  const drawn = useRef(false);
  useFrame(({ gl }) => {
    if (!drawn.current) {
      drawn.current = true;
      return;
    }
    const sample = source.sample();
    const from = sample?.q[index];
    const to = sample?.stopAt[index];
    mesh.visible = from !== undefined && to !== undefined && Math.abs(to - from) > LEAST_SWEEP;
    if (!mesh.visible || !sample || from === undefined || to === undefined) return;
    const position = mesh.geometry.getAttribute('position') as BufferAttribute;
    sweepCorners(model, index, from, to, sample.tool.position, position.array as Float32Array);
    position.needsUpdate = true;
    mesh.material.uniforms.pixelRatio!.value = gl.getPixelRatio();
  });
  return <primitive object={mesh} />;
}
