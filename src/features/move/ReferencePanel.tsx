import { useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { Dialog } from '../../components/Dialog';
import { GoButton } from '../../components/HoldButton';
import { TrustIcon } from '../../components/icons';
import { useArmState } from '../../live/use-live';

/** Joints with a switch, in the arm's set order; each is found by a hold. */
export function ReferenceButton({ model, disabled }: { model: ArmModel; disabled: boolean }) {
  const [open, setOpen] = useState(false);
  const trust = useArmState((state) => state?.trust ?? []);
  const order = model.referenceOrder.filter((i) => {
    const drive = model.joints[i]?.drive;
    return drive?.kind === 'stepper' && drive.reference.kind === 'switch';
  });
  if (order.length === 0) return null;
  return (
    <>
      <button type="button" className="btn sm" disabled={disabled} onClick={() => setOpen(true)}>
        Reference…
      </button>
      <Dialog open={open} onClose={() => setOpen(false)} title="Reference by switch">
        <p className="small">
          Hold a button: the joint creeps towards its switch and stops at the edge. Letting go stops it at
          once. Clear the way first; with the position unknown soft limits do not help.
        </p>
        <ol className="stack">
          {order.map((index, k) => (
            <li key={index} className="line">
              <span className="n">{k + 1}</span>
              <b>{model.joints[index]?.name}</b>
              <span className="lk">
                <TrustIcon trust={trust[index] ?? 'unknown'} />
                {trust[index]}
              </span>
              <span className="end">
                <GoButton
                  id={`reference-${index}`}
                  motion={{ kind: 'reference', joint: index }}
                  hint="creeps to its switch"
                  disabled={disabled}
                >
                  Hold to reference
                </GoButton>
              </span>
            </li>
          ))}
        </ol>
        <div className="acts">
          <button type="button" className="btn" onClick={() => setOpen(false)}>
            Close
          </button>
        </div>
      </Dialog>
    </>
  );
}
