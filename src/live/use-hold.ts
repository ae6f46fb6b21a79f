import {
  type KeyboardEvent,
  type MouseEvent,
  type PointerEvent,
  useCallback,
  useEffect,
  useRef,
  useSyncExternalStore,
} from 'react';
import type { HoldMotion } from '../../shared/live/client-messages';
import { activeHoldKey, beginHold, endHold, onHoldChange, SLIDE_OFF_PX } from './hold';

export function useActiveHold(): string | null {
  return useSyncExternalStore(onHoldChange, activeHoldKey);
}

/**
 * Everything a hold button needs. Mouse, touch and pen by pointer events; Space and Enter by key. A click that
 * comes without a press (from assistive technology) is a nudge, never a hold.
 */
export function useHoldButton(options: {
  key: string;
  motion: HoldMotion;
  disabled: boolean;
  /** What one press does while nudging is chosen, or for a synthetic click; null where there is no such step. */
  onNudge: (() => void) | null;
  /** True: a press is a nudge, not a hold. */
  nudging: boolean;
  /** Says whether a key event anywhere on the page is this button's letter; holding that key is a hold. */
  isLetter?: (event: globalThis.KeyboardEvent) => boolean;
}) {
  const { key, motion, disabled, onNudge, nudging, isLetter } = options;
  const held = useActiveHold() === key;
  const element = useRef<HTMLButtonElement>(null);
  const pointer = useRef<number | null>(null);
  const pressed = useRef(false);

  // The button going away or becoming unusable ends its hold.
  useEffect(() => {
    if (disabled && activeHoldKey() === key) endHold('not possible');
  }, [disabled, key]);
  useEffect(
    () => () => {
      if (activeHoldKey() === key) endHold('button gone');
    },
    [key],
  );

  // A second finger anywhere but on Stop, or any other key, while this one is held.
  useEffect(() => {
    if (!held) return;
    const onPointer = (event: globalThis.PointerEvent) => {
      if (event.pointerId !== pointer.current && !(event.target as Element | null)?.closest('[data-stop]'))
        endHold('second pointer');
    };
    const onKey = (event: globalThis.KeyboardEvent) => {
      if (event.repeat && pressed.current) return;
      endHold('another key');
    };
    document.addEventListener('pointerdown', onPointer, true);
    document.addEventListener('keydown', onKey, true);
    return () => {
      document.removeEventListener('pointerdown', onPointer, true);
      document.removeEventListener('keydown', onKey, true);
    };
  }, [held]);

  const start = useCallback(() => {
    if (disabled) return false;
    return beginHold(key, motion);
  }, [disabled, key, motion]);

  const release = (why: Parameters<typeof endHold>[0]) => {
    pointer.current = null;
    pressed.current = false;
    if (activeHoldKey() === key) endHold(why);
  };

  // The letter key. What is down is remembered outside the effects: they are renewed whenever the page draws
  // anew, and letting go must be heard all the same.
  const letterDown = useRef<string | null>(null);
  useEffect(() => {
    if (!isLetter) return;
    const onDown = (event: globalThis.KeyboardEvent) => {
      if (event.repeat || letterDown.current !== null || !isLetter(event) || !start()) return;
      letterDown.current = event.code;
      pressed.current = true;
    };
    window.addEventListener('keydown', onDown);
    return () => window.removeEventListener('keydown', onDown);
  }, [isLetter, start]);
  useEffect(() => {
    const onUp = (event: globalThis.KeyboardEvent) => {
      if (letterDown.current === null || event.code !== letterDown.current) return;
      letterDown.current = null;
      pressed.current = false;
      if (activeHoldKey() === key) endHold('released');
    };
    // A key that comes up elsewhere is not heard here.
    const onBlur = () => {
      letterDown.current = null;
    };
    window.addEventListener('keyup', onUp, true);
    window.addEventListener('blur', onBlur);
    return () => {
      window.removeEventListener('keyup', onUp, true);
      window.removeEventListener('blur', onBlur);
    };
  }, [key]);

  return {
    held,
    props: {
      ref: element,
      'aria-pressed': held,
      onPointerDown: (event: PointerEvent<HTMLButtonElement>) => {
        if (event.button !== 0 || !event.isPrimary || nudging) return;
        event.currentTarget.focus({ preventScroll: true });
        if (!start()) return;
        pointer.current = event.pointerId;
        event.currentTarget.setPointerCapture?.(event.pointerId);
      },
      onPointerMove: (event: PointerEvent<HTMLButtonElement>) => {
        if (pointer.current !== event.pointerId) return;
        const box = event.currentTarget.getBoundingClientRect();
        const outside =
          event.clientX < box.left - SLIDE_OFF_PX ||
          event.clientX > box.right + SLIDE_OFF_PX ||
          event.clientY < box.top - SLIDE_OFF_PX ||
          event.clientY > box.bottom + SLIDE_OFF_PX;
        if (outside) release('slid off');
      },
      onPointerUp: (event: PointerEvent<HTMLButtonElement>) => {
        if (pointer.current === event.pointerId) release('released');
      },
      onPointerCancel: () => release('pointer cancelled'),
      onLostPointerCapture: () => {
        if (pointer.current !== null) release('capture lost');
      },
      onContextMenu: (event: MouseEvent<HTMLButtonElement>) => {
        event.preventDefault();
        release('context menu');
      },
      onKeyDown: (event: KeyboardEvent<HTMLButtonElement>) => {
        if (event.key !== ' ' && event.key !== 'Enter') return;
        event.preventDefault();
        if (event.repeat || disabled) return;
        if (nudging) {
          onNudge?.();
          return;
        }
        pressed.current = start();
      },
      onKeyUp: (event: KeyboardEvent<HTMLButtonElement>) => {
        if (event.key !== ' ' && event.key !== 'Enter') return;
        event.preventDefault();
        if (pressed.current) release('released');
      },
      onBlur: () => {
        if (pressed.current) release('window left');
      },
      onClick: (event: MouseEvent<HTMLButtonElement>) => {
        if (disabled) return;
        // A real press in nudge mode, or a click without any press: one small step.
        if (nudging || event.detail === 0) onNudge?.();
      },
    },
  };
}
