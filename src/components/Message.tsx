import type { ReactNode } from 'react';
import { FaultIcon, MovingIcon, WarnIcon } from './icons';

/** In place, beside its cause: a note, something that moves, or a fault. */
export function Message({
  kind = 'note',
  children,
  action,
}: {
  kind?: 'note' | 'plan' | 'moving' | 'fault';
  children: ReactNode;
  action?: ReactNode;
}) {
  return (
    <div className={`msg ${kind === 'note' ? '' : kind}`} role={kind === 'fault' ? 'alert' : 'status'}>
      {kind === 'fault' ? <FaultIcon /> : kind === 'moving' ? <MovingIcon /> : <WarnIcon />}
      <div>{children}</div>
      {action ?? <span />}
    </div>
  );
}
