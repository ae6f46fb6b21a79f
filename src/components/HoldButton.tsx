import { type ReactNode, useMemo } from 'react';
import type { HoldMotion } from '../../shared/live/client-messages';
import { useActiveHold, useHoldButton } from '../live/use-hold';
import { isLetter } from './letter-keys';

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

/** "Hold to go there": one nose forward. Big ones may also be held by a letter key. */
export function GoButton({
  id,
  motion,
  children,
  hint,
  disabled,
  look = 'small',
  letter,
}: {
  id: string;
  motion: HoldMotion;
  children: ReactNode;
  hint: string;
  disabled: boolean;
  look?: 'small' | 'big';
  letter?: string;
}) {
  const isOurs = useMemo(
    () => (letter ? (event: KeyboardEvent) => isLetter(event, letter) : undefined),
    [letter],
  );
  const { held, props } = useHoldButton({
    key: id,
    motion,
    disabled,
    onNudge: null,
    nudging: false,
    isLetter: isOurs,
  });
  return (
    <button
      type="button"
      className={`go ${look === 'small' ? 'sm' : disabled || held ? '' : 'ink'} ${held ? 'held' : ''} ${disabled ? 'is-off' : ''}`}
      style={{ touchAction: 'none', userSelect: 'none' }}
      aria-disabled={disabled}
      {...props}
    >
      {look === 'big' && <GoPicture />}
      <span>
        {held ? 'let go to stop' : children}
        <small>{hint}</small>
      </span>
      {letter && !disabled && (
        <span aria-hidden="true">
          <kbd>{letter.toUpperCase()}</kbd>
        </span>
      )}
    </button>
  );
}

/** An elbow and the way it goes. */
const GoPicture = () => (
  <svg
    viewBox="0 0 40 30"
    width="44"
    height="33"
    fill="none"
    stroke="currentColor"
    strokeWidth="1.75"
    strokeLinecap="round"
    aria-hidden="true"
  >
    <path d="M5 24 12 7 27 14" strokeWidth="3" strokeLinejoin="round" />
    <circle cx="12" cy="7" r="3.2" fill="currentColor" />
    <path d="M24 24h9" strokeDasharray="2 3" />
    <path d="M38 24 31 27.8V20.2Z" fill="currentColor" stroke="none" />
  </svg>
);
