import { useEffect } from 'react';

/**
 * Single-letter keys (C to capture, G to go). They can be switched off, since speech input types letters
 * by accident (WCAG 2.2, 2.1.4); and they are deaf while somebody types.
 */
const KEY = 'elbowroom.letterKeys';

export const letterKeysOn = (): boolean => localStorage.getItem(KEY) !== 'off';

export function setLetterKeys(on: boolean): void {
  localStorage.setItem(KEY, on ? 'on' : 'off');
}

/** Whether this event is the letter, meant as a key of ours. */
export function isLetter(event: KeyboardEvent, letter: string): boolean {
  if (event.key.toLowerCase() !== letter || event.ctrlKey || event.metaKey || event.altKey) return false;
  const typing = (event.target as Element | null)?.closest?.('input, textarea, select, [contenteditable]');
  const asking = document.querySelector('[role="dialog"], [role="menu"]');
  return letterKeysOn() && !typing && !asking;
}

/** Does something on a fresh press of the letter. */
export function useLetterKey(letter: string, press: (() => void) | null): void {
  useEffect(() => {
    if (!press) return;
    const onKey = (event: KeyboardEvent) => {
      if (event.repeat || !isLetter(event, letter)) return;
      event.preventDefault();
      press();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [letter, press]);
}
