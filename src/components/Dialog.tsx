import { Dialog as Radix } from 'radix-ui';
import type { ReactNode } from 'react';

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
  return (
    <Radix.Root open={open} onOpenChange={(next) => !next && onClose()} modal={false}>
      <Radix.Portal>
        <div className="veil" aria-hidden="true" />
        <Radix.Content
          className="dialog"
          aria-describedby={undefined}
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
