import 'uplot/dist/uPlot.min.css';
import { useEffect, useRef } from 'react';
import uPlot from 'uplot';
import type { Rehearsal } from '../../../shared/api/resources';

/** Line types tell joints apart; colour never does it alone. */
const DASHES = [[], [6, 4], [2, 3], [10, 3, 2, 3], [1, 4], [14, 4], [4, 2], [8, 2]];

export default function TorquePlot({ rehearsal, names }: { rehearsal: Rehearsal; names: readonly string[] }) {
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const at = box.current;
    if (!at) return;
    const style = getComputedStyle(document.documentElement);
    const ink = style.getPropertyValue('--er-ink').trim();
    const grid = style.getPropertyValue('--er-grid').trim();
    const axis = {
      stroke: ink,
      grid: { stroke: grid, width: 1 },
      ticks: { stroke: grid },
      font: '12px "JetBrains Mono"',
    };
    const plot = new uPlot(
      {
        width: Math.max(220, at.clientWidth),
        height: Math.max(150, at.clientHeight - 40),
        cursor: { drag: { x: false, y: false } },
        scales: { x: { time: false }, y: { range: (_u, _min, max) => [0, Math.max(1.05, max)] } },
        axes: [
          { ...axis, values: (_u, splits) => splits.map((s) => `${s} s`) },
          { ...axis, values: (_u, splits) => splits.map((s) => `${Math.round(s * 100)}`) },
        ],
        series: [
          { label: 's', value: (_u, v) => (v === null ? '–' : v.toFixed(1)) },
          ...names.map((label, i) => ({
            label,
            stroke: ink,
            width: 1.6,
            dash: DASHES[i % DASHES.length],
            value: (_u: uPlot, v: number | null) => (v === null ? '–' : `${Math.round(v * 100)} %`),
          })),
        ],
      },
      [rehearsal.plot.t, ...rehearsal.plot.torqueUsed],
      at,
    );
    const resize = new ResizeObserver(() =>
      plot.setSize({ width: Math.max(220, at.clientWidth), height: plot.height }),
    );
    resize.observe(at);
    return () => {
      resize.disconnect();
      plot.destroy();
    };
  }, [rehearsal, names]);
  return (
    <div ref={box} className="torqueplot" role="img" aria-label="Torque used by each joint over one cycle" />
  );
}
