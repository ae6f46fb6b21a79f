import 'uplot/dist/uPlot.min.css';
import { useEffect, useRef, useState } from 'react';
import uPlot from 'uplot';
import type { Rehearsal } from '../../../shared/api/resources';
import { onTheme } from '../../components/theme';

/** Line types tell joints apart; colour never does it alone. */
export const DASHES = [[], [6, 4], [2, 3], [10, 3, 2, 3], [1, 4], [14, 4], [4, 2], [8, 2]];
const TIGHT = 0.8;
const ALL = 1;

/** Torque used by each joint over one cycle, with the lines where it is tight and where none is left. */
export default function TorquePlot({ rehearsal, names }: { rehearsal: Rehearsal; names: readonly string[] }) {
  const box = useRef<HTMLDivElement>(null);
  const [theme, setTheme] = useState(0);
  useEffect(() => onTheme(() => setTheme((n) => n + 1)), []);
  // biome-ignore lint/correctness/useExhaustiveDependencies: the theme changes the inks that are read below
  useEffect(() => {
    const at = box.current;
    if (!at) return;
    const plot = new uPlot(options(at, names), [rehearsal.plot.t, ...rehearsal.plot.torqueUsed], at);
    const resize = new ResizeObserver(() => plot.setSize(sizeOf(at)));
    resize.observe(at);
    return () => {
      resize.disconnect();
      plot.destroy();
    };
  }, [rehearsal, names, theme]);
  return <div ref={box} className="torqueplot" role="img" aria-label={summary(rehearsal, names)} />;
}

const sizeOf = (at: HTMLElement) => ({
  width: Math.max(220, at.clientWidth),
  height: Math.max(150, at.clientHeight),
});

function options(at: HTMLElement, names: readonly string[]): uPlot.Options {
  const style = getComputedStyle(document.documentElement);
  const inkOf = (name: string) => style.getPropertyValue(name).trim();
  const ink = inkOf('--er-ink');
  const axis = {
    stroke: inkOf('--er-ink-2'),
    grid: { stroke: inkOf('--er-grid'), width: 1 },
    ticks: { stroke: inkOf('--er-edge'), width: 1, size: 5 },
    font: '12px "JetBrains Mono"',
  };
  return {
    ...sizeOf(at),
    legend: { show: false },
    cursor: { show: false },
    scales: { x: { time: false }, y: { range: (_plot, _low, high) => [0, Math.max(1.1, high * 1.05)] } },
    axes: [
      { ...axis, values: (_plot, splits) => splits.map((s) => `${s} s`) },
      { ...axis, size: 44, values: (_plot, splits) => splits.map((s) => `${Math.round(s * 100)}`) },
    ],
    series: [
      {},
      ...names.map((label, i) => ({
        label,
        stroke: ink,
        width: i === 0 ? 2 : 1.6,
        dash: DASHES[i % DASHES.length],
        points: { show: false },
      })),
    ],
    hooks: { draw: [(plot) => drawLevels(plot, ink, inkOf('--er-ink-2'))] },
  };
}

/** "all the torque there is", and where it becomes tight. */
function drawLevels(plot: uPlot, ink: string, quiet: string): void {
  const { ctx, bbox } = plot;
  const ratio = devicePixelRatio;
  const level = (share: number, text: string, dash: number[], colour: string, weight: number) => {
    const y = Math.round(plot.valToPos(share, 'y', true));
    ctx.save();
    ctx.strokeStyle = colour;
    ctx.lineWidth = weight * ratio;
    ctx.setLineDash(dash.map((d) => d * ratio));
    ctx.beginPath();
    ctx.moveTo(bbox.left, y);
    ctx.lineTo(bbox.left + bbox.width, y);
    ctx.stroke();
    ctx.fillStyle = colour;
    ctx.font = `${12 * ratio}px ${getComputedStyle(document.body).fontFamily}`;
    ctx.textAlign = 'right';
    ctx.textBaseline = 'bottom';
    ctx.fillText(text, bbox.left + bbox.width - 4 * ratio, y - 3 * ratio);
    ctx.restore();
  };
  level(ALL, 'all the torque there is', [], ink, 1.5);
  level(TIGHT, 'tight above 80 %', [2, 3], quiet, 1);
}

/** The plot in words: each joint's highest share. */
function summary({ plot }: Rehearsal, names: readonly string[]): string {
  const highest = names.map((name, i) => {
    const most = (plot.torqueUsed[i] ?? []).reduce((a, b) => Math.max(a, b), 0);
    return `${name} up to ${Math.round(most * 100)} %`;
  });
  return `Torque used over one cycle: ${highest.join(', ')}.`;
}
