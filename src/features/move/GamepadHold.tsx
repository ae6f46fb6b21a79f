import { useEffect, useRef, useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { pressStop } from '../../live/connection';
import { PAD, type PadState, padAtRest, readPad } from '../../live/gamepad';
import { activeHoldKey, beginHold, endHold } from '../../live/hold';

const HOLD_KEY = 'gamepad';

/** Hidden until a game controller's button is pressed. Polled only while the page is visible and focused. */
export function GamepadHold({ model, usable }: { model: ArmModel; usable: boolean }) {
  const [seen, setSeen] = useState(false);
  const [joint, setJoint] = useState(0);
  const state = useRef<PadState>(padAtRest);
  const before = useRef<readonly boolean[]>([]);

  useEffect(() => {
    const found = () => setSeen(true);
    const gone = () => {
      setSeen(navigator.getGamepads().some((pad) => pad !== null));
      if (activeHoldKey() === HOLD_KEY) endHold('game controller');
    };
    window.addEventListener('gamepadconnected', found);
    window.addEventListener('gamepaddisconnected', gone);
    return () => {
      window.removeEventListener('gamepadconnected', found);
      window.removeEventListener('gamepaddisconnected', gone);
    };
  }, []);

  useEffect(() => {
    if (!seen) return;
    let frame = 0;
    const poll = () => {
      frame = requestAnimationFrame(poll);
      const pad =
        document.hidden || !document.hasFocus() ? null : navigator.getGamepads().find((p) => p !== null);
      const reading = pad
        ? {
            buttons: pad.buttons.map((b) => b.pressed),
            x: pad.axes[0] ?? 0,
            y: pad.axes[1] ?? 0,
            // The pad's own clock is the page's.
            changedAtMs: pad.timestamp,
          }
        : null;
      const fresh = (button: number) => (reading?.buttons[button] ?? false) && !before.current[button];
      if (fresh(PAD.stop)) {
        endHold('stopped');
        pressStop();
      }
      const { direction: was } = state.current;
      state.current = usable ? readPad(state.current, reading, performance.now()) : padAtRest;
      const { direction } = state.current;
      if (was === 0 && direction !== 0)
        beginHold(HOLD_KEY, { kind: 'jog', frame: 'joint', axis: joint, direction });
      if (was !== 0 && direction === 0 && activeHoldKey() === HOLD_KEY) endHold('game controller');
      if (direction === 0) {
        if (fresh(PAD.nextJoint)) setJoint((j) => Math.min(model.joints.length - 1, j + 1));
        if (fresh(PAD.previousJoint)) setJoint((j) => Math.max(0, j - 1));
      }
      before.current = reading?.buttons ?? [];
    };
    frame = requestAnimationFrame(poll);
    return () => {
      cancelAnimationFrame(frame);
      if (activeHoldKey() === HOLD_KEY) endHold('game controller');
    };
  }, [seen, usable, joint, model]);

  if (!seen) return null;
  return (
    <p className="small line" role="status">
      Game controller: <b>{model.joints[joint]?.name}</b>
      <span className="note">
        hold the left shoulder button and push the stick; up and down choose the joint; the right face button
        stops
      </span>
    </p>
  );
}
