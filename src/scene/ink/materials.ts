import { BackSide, Color, DoubleSide, ShaderMaterial, Vector2 } from 'three';
import type { Inks } from '../inks';

/** Line widths of the sheet, CSS px. */
const OUTLINE_PX = 1.1;
const EDGE_PX = 1.25;
const DASH_PX = 2.6;

/** One set for the whole scene, so that a change of colours or zoom is made in one place. */
export interface InkMaterials {
  paper: ShaderMaterial;
  known: LinePair;
  /** Dotted: where it was last seen. */
  unknown: LinePair;
  thin: ShaderMaterial;
  centre: ShaderMaterial;
  all(): ShaderMaterial[];
}
export interface LinePair {
  outline: ShaderMaterial;
  edge: ShaderMaterial;
}

// Up is card, the side away from the light is shaded, the rest is the sheet: as the boxes of the drawing sheet.
const PAPER_VERTEX = /* glsl */ `
  attribute float wash;
  varying float vWash; varying vec3 vWorld; varying vec3 vView;
  void main() {
    vWash = wash;
    vWorld = normalize(mat3(modelMatrix) * normal);
    vView = normalize(normalMatrix * normal);
    gl_Position = projectionMatrix * modelViewMatrix * vec4(position, 1.0);
  }`;
const PAPER_FRAGMENT = /* glsl */ `
  uniform vec3 sheet; uniform vec3 card; uniform vec3 shade; uniform vec3 dark;
  varying float vWash; varying vec3 vWorld; varying vec3 vView;
  void main() {
    vec3 colour = sheet;
    if (vWash > 1.5) colour = dark;
    else if (vWorld.z > 0.85) colour = card;
    else if (vWash > 0.5 && vView.x < -0.3) colour = shade;
    gl_FragColor = vec4(colour, 1.0);
    #include <colorspace_fragment>
  }`;

// The solid grown by a few pixels and seen from behind: what stands out around it is its outline.
const OUTLINE_VERTEX = /* glsl */ `
  attribute vec3 outward;
  uniform vec2 halfSize; uniform float width;
  void main() {
    gl_Position = projectionMatrix * modelViewMatrix * vec4(position, 1.0);
    vec2 way = (normalMatrix * outward).xy;
    float size = length(way);
    if (size > 1e-4) gl_Position.xy += way / size * width / halfSize * gl_Position.w;
  }`;
const OUTLINE_FRAGMENT = /* glsl */ `
  uniform vec3 ink; uniform float dotted;
  void main() {
    // Unequal pitches, so that no line of a usual slope falls between the dots.
    if (dotted > 0.0 && sin(gl_FragCoord.x * dotted) * sin(gl_FragCoord.y * dotted * 0.83) < 0.0) discard;
    gl_FragColor = vec4(ink, 1.0);
    #include <colorspace_fragment>
  }`;

// A ribbon of the ink's width between two points, facing the eye. Not three's own wide lines: those are instanced,
// and a machine that draws without a graphics card takes each instance on its own, which held up the whole page.
const EDGE_VERTEX = /* glsl */ `
  attribute vec3 other; attribute float side; attribute float far;
  uniform vec2 halfSize; uniform float width;
  varying float vAlong;
  void main() {
    gl_Position = projectionMatrix * modelViewMatrix * vec4(position, 1.0);
    vec4 there = projectionMatrix * modelViewMatrix * vec4(other, 1.0);
    vec2 way = (there.xy / there.w - gl_Position.xy / gl_Position.w) * halfSize;
    float size = length(way);
    vec2 along = size > 1e-4 ? way / size : vec2(1.0, 0.0);
    vAlong = far * size;
    // A third of the width beyond its ends, so that corners close.
    vec2 grown = vec2(-along.y, along.x) * side * 0.5 - along * 0.33;
    gl_Position.xy += grown * width / halfSize * gl_Position.w;
  }`;
const EDGE_FRAGMENT = /* glsl */ `
  uniform vec3 ink; uniform float dashed;
  varying float vAlong;
  void main() {
    if (dashed > 0.0 && mod(vAlong, 2.0 * dashed) > dashed) discard;
    gl_FragColor = vec4(ink, 1.0);
    #include <colorspace_fragment>
  }`;

// A hairline lifted towards the eye: a tube's centre line is drawn on its near side.
const MARK_VERTEX = /* glsl */ `
  attribute float along; attribute float lift;
  varying float vAlong;
  void main() {
    vAlong = along;
    vec4 view = modelViewMatrix * vec4(position, 1.0);
    view.z += lift;
    gl_Position = projectionMatrix * view;
  }`;
const MARK_FRAGMENT = /* glsl */ `
  uniform vec3 ink; uniform float zoom; uniform float dashed;
  varying float vAlong;
  void main() {
    float at = mod(vAlong * zoom, 18.0);
    if (dashed > 0.5 && ((at > 10.0 && at < 13.0) || at > 15.0)) discard;
    gl_FragColor = vec4(ink, 1.0);
    #include <colorspace_fragment>
  }`;

function linePair(dotted: boolean, shared: { halfSize: { value: Vector2 } }): LinePair {
  const outline = new ShaderMaterial({
    vertexShader: OUTLINE_VERTEX,
    fragmentShader: OUTLINE_FRAGMENT,
    uniforms: {
      ink: { value: new Color() },
      dotted: { value: dotted ? 1 : 0 },
      width: { value: OUTLINE_PX },
      halfSize: shared.halfSize,
    },
    side: BackSide,
  });
  const edge = new ShaderMaterial({
    vertexShader: EDGE_VERTEX,
    fragmentShader: EDGE_FRAGMENT,
    uniforms: {
      ink: { value: new Color() },
      dashed: { value: dotted ? DASH_PX : 0 },
      width: { value: EDGE_PX },
      halfSize: shared.halfSize,
    },
    side: DoubleSide,
  });
  return { outline, edge };
}

export function makeInkMaterials(): InkMaterials {
  const halfSize = { value: new Vector2(1, 1) };
  const zoom = { value: 1 };
  const paper = new ShaderMaterial({
    vertexShader: PAPER_VERTEX,
    fragmentShader: PAPER_FRAGMENT,
    uniforms: {
      sheet: { value: new Color() },
      card: { value: new Color() },
      shade: { value: new Color() },
      dark: { value: new Color() },
    },
    // Ink lies on the paper: edges of a face win over the face.
    polygonOffset: true,
    polygonOffsetFactor: 1.5,
    polygonOffsetUnits: 2,
  });
  const mark = (dashed: number) =>
    new ShaderMaterial({
      vertexShader: MARK_VERTEX,
      fragmentShader: MARK_FRAGMENT,
      uniforms: { ink: { value: new Color() }, zoom, dashed: { value: dashed } },
    });
  const materials = {
    paper,
    known: linePair(false, { halfSize }),
    unknown: linePair(true, { halfSize }),
    thin: mark(0),
    centre: mark(1),
  };
  const all = () => [
    materials.paper,
    materials.known.outline,
    materials.known.edge,
    materials.unknown.outline,
    materials.unknown.edge,
    materials.thin,
    materials.centre,
  ];
  return { ...materials, all };
}

export function colourMaterials(materials: InkMaterials, inks: Inks): void {
  const paper = materials.paper.uniforms as Record<string, { value: Color }>;
  paper.sheet!.value.set(inks.paper);
  paper.card!.value.set(inks.card);
  paper.shade!.value.set(inks.shade);
  paper.dark!.value.set(inks.ink2);
  (materials.known.outline.uniforms.ink!.value as Color).set(inks.ink);
  (materials.known.edge.uniforms.ink!.value as Color).set(inks.ink);
  (materials.unknown.outline.uniforms.ink!.value as Color).set(inks.ink2);
  (materials.unknown.edge.uniforms.ink!.value as Color).set(inks.ink2);
  (materials.thin.uniforms.ink!.value as Color).set(inks.ink);
  (materials.centre.uniforms.ink!.value as Color).set(inks.ink2);
}

/**
 * Lines keep their width in px whatever the zoom.
 *
 * @param zoom - CSS px per metre; @param width @param height - of the canvas, CSS px; @param pixelRatio - device px per CSS px
 */
export function scaleMaterials(
  materials: InkMaterials,
  zoom: number,
  width: number,
  height: number,
  pixelRatio: number,
): void {
  (materials.known.outline.uniforms.halfSize!.value as Vector2).set(width / 2, height / 2);
  materials.centre.uniforms.zoom!.value = zoom;
  materials.unknown.outline.uniforms.dotted!.value = 1.05 / pixelRatio;
}
