import { useFrame, useThree } from '@react-three/fiber';
import { useEffect, useRef } from 'react';
import type { SceneSource } from './source';

/** Between two pictures at least this long, ms, and at least this many times as long as the last one took. */
const LEAST_PAUSE_MS = 30;
const PAUSE_PER_DRAWING = 3;

/**
 * Draws when there is something new to draw, and not otherwise. A slow machine draws less often: the picture
 * must never keep the page from its holds.
 */
export function DrawOnSamples({ source }: { source: SceneSource }) {
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
  useEffect(() => {
    let last: ReturnType<typeof setTimeout> | undefined;
    const draw = () => {
      drawing.current.asked = true;
      invalidate();
    };
    const stop = source.subscribe(() => {
      clearTimeout(last);
      const now = drawing.current;
      if (now.asked) return;
      const pauseMs = Math.max(LEAST_PAUSE_MS, PAUSE_PER_DRAWING * now.tookMs);
      const waitMs = now.endedAtMs + pauseMs - performance.now();
      // The last of a burst is drawn too, or the picture would stay at the one before it.
      if (waitMs > 0) last = setTimeout(draw, waitMs);
      else draw();
    });
    return () => {
      clearTimeout(last);
      stop();
    };
  }, [source, invalidate]);
  return null;
}
