import 'uplot/dist/uPlot.min.css';
import { useEffect, useRef, useState } from 'react';
import uPlot from 'uplot';
import type { RunCycle } from '../../../shared/api/resources';
import { onTheme } from '../../components/theme';

const HEIGHT = 180;

/** A bar for every cycle; held ones are drawn hollow. */
export default function CyclePlot({
  cycles,
  label,
}: {
  cycles: readonly Pick<RunCycle, 'cycle' | 'seconds' | 'held'>[];
  /** The plot in words. */
  label: string;
}) {
  const box = useRef<HTMLDivElement>(null);
  const [theme, setTheme] = useState(0);
  useEffect(() => onTheme(() => setTheme((n) => n + 1)), []);
  // biome-ignore lint/correctness/useExhaustiveDependencies: the theme changes the inks that are read below
  useEffect(() => {
    const at = box.current;
    if (!at || cycles.length === 0) return;
    const plot = new uPlot(
      options(at),
      [
        cycles.map((c) => c.cycle),
        cycles.map((c) => (c.held ? null : c.seconds)),
        cycles.map((c) => (c.held ? c.seconds : null)),
      ],
      at,
    );
    const resize = new ResizeObserver(() => plot.setSize({ width: widthOf(at), height: HEIGHT }));
    resize.observe(at);
    return () => {
      resize.disconnect();
      plot.destroy();
    };
  }, [cycles, theme]);
  return <div ref={box} className="cycleplot" role="img" aria-label={label} />;
}

const widthOf = (at: HTMLElement) => Math.max(220, at.clientWidth);

function options(at: HTMLElement): uPlot.Options {
  const style = getComputedStyle(document.documentElement);
  const inkOf = (name: string) => style.getPropertyValue(name).trim();
  const ink = inkOf('--er-ink');
  const axis = {
    stroke: inkOf('--er-ink-2'),
    grid: { stroke: inkOf('--er-grid'), width: 1 },
    ticks: { stroke: inkOf('--er-edge'), width: 1, size: 5 },
    font: '12px "JetBrains Mono"',
  };
  const bars = uPlot.paths.bars?.({ size: [0.7, 34] });
  const series = { paths: bars, points: { show: false }, stroke: ink, width: 1.5 };
  return {
    width: widthOf(at),
    height: HEIGHT,
    legend: { show: false },
    cursor: { show: false },
    scales: {
      x: { time: false, range: (_plot, low, high) => [low - 0.6, high + 0.6] },
      y: { range: (_plot, _low, high) => [0, Math.max(1, high) * 1.12] },
    },
    axes: [
      {
        ...axis,
        grid: { show: false },
        incrs: [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000],
        values: (_plot, splits) => splits.map((s) => (Number.isInteger(s) ? String(s) : '')),
      },
      { ...axis, size: 54, values: (_plot, splits) => splits.map((s) => `${s} s`) },
    ],
    series: [{}, { ...series, fill: ink }, series],
  };
}
