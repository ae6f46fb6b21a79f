import type { RefObject } from 'react';

/** What the driver writes into, once per picture, without React. */
export interface SheetElements {
  trace: SVGPathElement | null;
  target: SVGPathElement | null;
  truth: SVGPathElement | null;
  dims: SVGGElement | null;
  plumb: SVGPathElement | null;
  dimLines: SVGPathElement | null;
  arrows: SVGPathElement | null;
  up: SVGGElement | null;
  upFigure: SVGTextElement | null;
  out: SVGTextElement | null;
  outFigure: SVGTSpanElement | null;
  note: SVGGElement | null;
  noteFigure: SVGTSpanElement | null;
  noteJoint: SVGTextElement | null;
  lead: SVGPathElement | null;
}

export const noSheetElements = (): SheetElements => ({
  trace: null,
  target: null,
  truth: null,
  dims: null,
  plumb: null,
  dimLines: null,
  arrows: null,
  up: null,
  upFigure: null,
  out: null,
  outFigure: null,
  note: null,
  noteFigure: null,
  noteJoint: null,
  lead: null,
});

/** The lines a draughtsman adds over the solids: dimensions, path, target, and what the stopping shadow says. */
export function SheetLines({ elements }: { elements: RefObject<SheetElements> }) {
  const keep =
    <K extends keyof SheetElements>(key: K) =>
    (element: SheetElements[K]) => {
      elements.current[key] = element;
    };
  return (
    <svg className="scene-lines" aria-hidden="true">
      <path className="trace" ref={keep('trace')} />
      <path className="truth" ref={keep('truth')} />
      <path className="target" ref={keep('target')} />
      <g className="dims" ref={keep('dims')}>
        <path className="plumb" ref={keep('plumb')} />
        <path className="dim" ref={keep('dimLines')} />
        <path className="arrow" ref={keep('arrows')} />
        <g ref={keep('up')}>
          <text className="figure" ref={keep('upFigure')} />
          <text y="15">up</text>
        </g>
        <text textAnchor="middle" ref={keep('out')}>
          <tspan className="figure" ref={keep('outFigure')} />
          <tspan> out</tspan>
        </text>
      </g>
      <g ref={keep('note')} className="note-lines">
        <path className="lead" ref={keep('lead')} />
        <text className="travel" x="20" y="22">
          would still travel <tspan className="figure" ref={keep('noteFigure')} />
        </text>
        <text x="20" y="39" ref={keep('noteJoint')} />
      </g>
    </svg>
  );
}
