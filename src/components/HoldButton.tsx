import type { ReactNode } from 'react';
import type { HoldMotion } from '../../shared/live/client-messages';
import { useActiveHold, useHoldButton } from '../live/use-hold';

/** A button with one nose pointing outward: the motion lasts only while it is pressed. */
export function HoldButton({
  id,
  side,
  motion,
  picture,
  word,
  doing,
  label,
  reason,
  atLimit = false,
  nudge,
  nudging = false,
  nudgeText,
}: {
  id: string;
  side: 'neg' | 'pos';
  motion: HoldMotion;
  picture: ReactNode;
  word: string;
  doing: string;
  /** What assistive technology reads. */
  label: string;
  /** Why it may not be used now, or null. */
  reason: string | null;
  atLimit?: boolean;
  nudge: (() => void) | null;
  nudging?: boolean;
  nudgeText?: string;
}) {
  const other = useActiveHold();
  const { held, props } = useHoldButton({
    key: id,
    motion,
    disabled: reason !== null || atLimit,
    onNudge: nudge,
    nudging,
  });
  const look = held ? 'held' : atLimit ? 'limit' : reason !== null ? 'no' : other !== null ? 'wait' : '';
  const small = held
    ? 'let go to stop'
    : atLimit
      ? 'at limit'
      : reason !== null
        ? reason
        : nudging
          ? nudgeText
          : null;
  return (
    <button
      type="button"
      className={`hold ${side} ${look}`}
      aria-label={held ? `${doing}: let go to stop` : label}
      aria-disabled={reason !== null || atLimit}
      {...props}
    >
      {picture}
      <span>{held ? doing : word}</span>
      {small && <small>{small}</small>}
    </button>
  );
}

/** "Hold to go there": one nose forward. */
export function GoButton({
  id,
  motion,
  children,
  hint,
  disabled,
}: {
  id: string;
  motion: HoldMotion;
  children: ReactNode;
  hint: string;
  disabled: boolean;
}) {
  const { held, props } = useHoldButton({ key: id, motion, disabled, onNudge: null, nudging: false });
  return (
    <button
      type="button"
      className={`go sm ${held ? 'held' : ''} ${disabled ? 'is-off' : ''}`}
      style={{ touchAction: 'none', userSelect: 'none' }}
      aria-disabled={disabled}
      {...props}
    >
      <span>
        {held ? 'let go to stop' : children}
        <small>{hint}</small>
      </span>
    </button>
  );
}
