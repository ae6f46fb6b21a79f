import { useEffect, useRef, useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { Dialog } from '../../components/Dialog';
import { MotorsOffIcon } from '../../components/icons';
import { namesOf } from '../../components/joint-names';
import { Message } from '../../components/Message';
import { sendCommand } from '../../live/connection';

/** How long the button has to be held, ms. */
const HOLD_MS = 1000;

/** Says which joints would drop before anything happens, then needs a one-second hold. */
export function MotorsOffDialog({
  open,
  onClose,
  model,
  drops,
}: {
  open: boolean;
  onClose: () => void;
  model: ArmModel;
  drops: readonly number[];
}) {
  const [refused, setRefused] = useState<string | null>(null);
  const [held, setHeld] = useState(false);
  const timer = useRef<number | undefined>(undefined);
  useEffect(() => () => window.clearTimeout(timer.current), []);
  const end = () => {
    window.clearTimeout(timer.current);
    setHeld(false);
  };
  const begin = () => {
    setHeld(true);
    setRefused(null);
    timer.current = window.setTimeout(() => {
      setHeld(false);
      void sendCommand({ type: 'motors.off', dropsAccepted: [...drops] }).then((outcome) => {
        if (outcome.ok) onClose();
        else setRefused(outcome.message);
      });
    }, HOLD_MS);
  };
  return (
    <Dialog open={open} onClose={onClose} title={`Motors of ${model.name} off?`}>
      <div className="caution">
        <h3>
          {drops.length > 0 ? `${namesOf(model, drops)} would drop.` : 'No joint would drop by itself.'}
        </h3>
        <ul>
          <li>Support the arm with your hand before you go on; keep fingers out of its joints.</li>
          <li>The position becomes unknown: declare or reference it afterwards.</li>
          <li>The supply may still be live. Disconnect it before you touch the wiring.</li>
        </ul>
      </div>
      {refused && <Message kind="fault">{refused}</Message>}
      <div className="acts">
        <button type="button" className="btn" onClick={onClose}>
          Keep them on
        </button>
        <button
          type="button"
          className={`go sm drop ${held ? 'held' : ''}`}
          onPointerDown={begin}
          onPointerUp={end}
          onPointerCancel={end}
          onPointerLeave={end}
          onContextMenu={(event) => event.preventDefault()}
          onKeyDown={(event) => {
            if (event.key !== ' ' && event.key !== 'Enter') return;
            event.preventDefault();
            if (!event.repeat) begin();
          }}
          onKeyUp={end}
          onBlur={end}
        >
          <MotorsOffIcon />
          <span>
            Motors off
            <small>hold for one second</small>
          </span>
        </button>
      </div>
    </Dialog>
  );
}
