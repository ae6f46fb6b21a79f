import { Canvas, useFrame, useThree } from '@react-three/fiber';
import { useEffect, useRef, useState } from 'react';
import type { ArmModel } from '../../shared/arm/model';
import { Arm } from './Arm';
import { Bench, Floor } from './Bench';
import { CameraRig } from './CameraRig';
import { InksContext, useReadInks } from './inks';
import type { SceneSource } from './source';
import { ChainLine, ToolTrace } from './Traces';
import type { View } from './views';

/** Between two pictures at least this long, ms, and at least this many times as long as the last one took. */
const LEAST_PAUSE_MS = 30;
const PAUSE_PER_DRAWING = 3;

/**
 * Draws when there is something new to draw, and not otherwise. A slow machine draws less often: the picture
 * must never keep the page from its holds.
 */
function DrawOnSamples({ source }: { source: SceneSource }) {
  const invalidate = useThree((three) => three.invalidate);
  const gl = useThree((three) => three.gl);
  const drawing = useRef({ startedAtMs: 0, tookMs: 0, endedAtMs: 0, asked: false });
  useFrame(() => {
    const now = drawing.current;
    now.startedAtMs = performance.now();
    now.asked = false;
    // The picture is drawn right after this; a task later its cost is known.
    setTimeout(() => {
      now.endedAtMs = performance.now();
      now.tookMs = now.endedAtMs - now.startedAtMs;
      gl.domElement.dataset.frames = String(gl.info.render.frame);
    });
  });
  useEffect(
    () =>
      source.subscribe(() => {
        const now = drawing.current;
        const pauseMs = Math.max(LEAST_PAUSE_MS, PAUSE_PER_DRAWING * now.tookMs);
        if (now.asked || performance.now() - now.endedAtMs < pauseMs) return;
        now.asked = true;
        invalidate();
      }),
    [source, invalidate],
  );
  return null;
}

/** The arm as a drawing in three dimensions. Numbers and Stop never depend on it. */
export default function ArmScene({
  model,
  view,
  source,
  known,
  showTruth = false,
}: {
  model: ArmModel;
  view: View;
  source: SceneSource;
  known: boolean;
  showTruth?: boolean;
}) {
  const inks = useReadInks();
  const [lost, setLost] = useState(false);
  const frame = useRef<HTMLDivElement>(null);
  return (
    <div ref={frame} className="scene" style={{ position: 'absolute', inset: 0 }}>
      <Canvas
        orthographic
        flat
        frameloop="demand"
        dpr={1}
        camera={{ near: -10, far: 20, position: [2, -2, 2], up: [0, 0, 1] }}
        gl={{ antialias: true, alpha: true }}
        onCreated={({ gl }) => {
          gl.domElement.dataset.ready = 'true';
          gl.domElement.setAttribute(
            'aria-label',
            `${model.name}, drawn in three dimensions; drag to turn the view`,
          );
          gl.domElement.setAttribute('role', 'img');
          gl.domElement.addEventListener('webglcontextlost', (event) => {
            event.preventDefault();
            setLost(true);
          });
          gl.domElement.addEventListener('webglcontextrestored', () => setLost(false));
        }}
      >
        <InksContext.Provider value={inks}>
          <CameraRig model={model} view={view} />
          <DrawOnSamples source={source} />
          <Floor />
          <Bench objects={model.bench} />
          <Arm model={model} source={source} known={known} />
          <ToolTrace source={source} />
          <ChainLine model={model} source={source} pick="target" color={inks.plan} />
          {showTruth && <ChainLine model={model} source={source} pick="truth" color={inks.ink2} />}
        </InksContext.Provider>
      </Canvas>
      {lost && (
        <p className="stage-note" role="status">
          <b>The picture was lost.</b> The numbers beside it are right. Load the page again to draw it.
        </p>
      )}
    </div>
  );
}
