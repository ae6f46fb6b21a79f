import { Dialog as Radix } from 'radix-ui';
import { type KeyboardEvent, type ReactNode, useEffect, useLayoutEffect, useRef } from 'react';

/** Everything the veil lies over; Stop and the live regions are not part of it. */
const COVERED = '.page > :not(.strip, .vh), .strip > :not(.stopcell)';

/** What is covered can be neither pressed nor reached by keyboard, so focus never hides behind the veil. */
function useCovered(open: boolean): void {
  useEffect(() => {
    if (!open) return;
    const covered = [...document.querySelectorAll<HTMLElement>(COVERED)].filter((part) => !part.inert);
    for (const part of covered) part.inert = true;
    return () => {
      for (const part of covered) part.inert = false;
    };
  }, [open]);
}

/** Radix leads Tab around in a circle; after the last thing in the question comes Stop, and then the first again. */
function tabToStop(event: KeyboardEvent<HTMLElement>): void {
  if (event.key !== 'Tab' || event.shiftKey) return;
  const reachable = ':is(a[href], button, input, select, textarea):not(:disabled)';
  const last = [...event.currentTarget.querySelectorAll(reachable)].at(-1);
  const stop = document.querySelector<HTMLElement>('[data-stop]');
  if (!stop || document.activeElement !== last) return;
  event.preventDefault();
  event.stopPropagation();
  stop.focus();
}

/**
 * A question above the sheet. Esc belongs to Stop and does not close it; a press outside does not either, and
 * Stop itself stays uncovered and in reach. Not modal to assistive technology for that same reason.
 */
export function Dialog({
  open,
  onClose,
  title,
  children,
}: {
  open: boolean;
  onClose: () => void;
  title: string;
  children: ReactNode;
}) {
  useCovered(open);
  const before = useRef<HTMLElement | null>(null);
  // Before Radix moves the focus into the question, which it does in a later effect.
  useLayoutEffect(() => {
    if (open && document.activeElement instanceof HTMLElement) before.current = document.activeElement;
  }, [open]);
  return (
    <Radix.Root open={open} onOpenChange={(next) => !next && onClose()} modal={false}>
      <Radix.Portal>
        <div className="veil" aria-hidden="true" />
        <Radix.Content
          className="dialog"
          aria-describedby={undefined}
          onKeyDownCapture={tabToStop}
          onCloseAutoFocus={(event) => {
            // Without a trigger of its own Radix would leave the focus nowhere.
            event.preventDefault();
            before.current?.focus();
          }}
          onEscapeKeyDown={(event) => event.preventDefault()}
          onInteractOutside={(event) => event.preventDefault()}
        >
          <Radix.Title className="h2">{title}</Radix.Title>
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
