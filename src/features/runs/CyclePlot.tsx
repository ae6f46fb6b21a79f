import 'uplot/dist/uPlot.min.css';
import { useEffect, useRef } from 'react';
import uPlot from 'uplot';
import type { RunCycle } from '../../../shared/api/resources';

/** Every cycle's time, in order. */
export default function CyclePlot({ cycles }: { cycles: readonly RunCycle[] }) {
  const box = useRef<HTMLDivElement>(null);
  useEffect(() => {
    const at = box.current;
    if (!at || cycles.length === 0) return;
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
        height: 160,
        cursor: { drag: { x: false, y: false } },
        scales: { x: { time: false }, y: { range: (_u, _min, max) => [0, max * 1.15] } },
        axes: [
          { ...axis, incrs: [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000] },
          { ...axis, values: (_u, splits) => splits.map((s) => `${s} s`) },
        ],
        series: [
          { label: 'cycle' },
          {
            label: 'time',
            stroke: ink,
            width: 1.6,
            points: { show: true, size: 7, fill: ink },
            value: (_u, v) => (v === null ? '–' : `${v.toFixed(2)} s`),
          },
        ],
      },
      [cycles.map((c) => c.cycle), cycles.map((c) => c.seconds)],
      at,
    );
    const resize = new ResizeObserver(() =>
      plot.setSize({ width: Math.max(220, at.clientWidth), height: 160 }),
    );
    resize.observe(at);
    return () => {
      resize.disconnect();
      plot.destroy();
    };
  }, [cycles]);
  return <div ref={box} className="cycleplot" role="img" aria-label="Time of every cycle" />;
}
