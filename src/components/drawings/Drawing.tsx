import './drawing.css';

/** One line or face of a drawing: what it is (see drawing.css) and its path. */
export type Stroke = readonly [kind: string, path: string];

/** Lines of a drawing, back to front. Decorative: goes into an svg that is hidden from assistive technology. */
export function Strokes({ of }: { of: readonly Stroke[] }) {
  return of.map(([kind, path], i) => <path key={i} className={kind} d={path} />);
}
