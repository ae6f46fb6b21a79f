import { DropdownMenu } from 'radix-ui';
import { type ComponentProps, createContext, useContext, useState } from 'react';

/** Closes the menu around. */
const CloseMenu = createContext<() => void>(() => {});

/** A list of acts below a button. It does not block the page: Stop stays in reach while it is open. */
export function Menu({
  defaultOpen = false,
  children,
}: {
  defaultOpen?: boolean;
  children: React.ReactNode;
}) {
  const [open, setOpen] = useState(defaultOpen);
  return (
    <CloseMenu.Provider value={() => setOpen(false)}>
      <DropdownMenu.Root open={open} onOpenChange={setOpen} modal={false}>
        {children}
      </DropdownMenu.Root>
    </CloseMenu.Provider>
  );
}

/**
 * The list itself. Esc is Stop and closes nothing, so Tab is the keyboard's way out: it closes the list and goes
 * back to its button. (Radix keeps Tab for itself and leaves only Esc.)
 */
export function MenuList({ className = 'menu-list', ...rest }: ComponentProps<typeof DropdownMenu.Content>) {
  const close = useContext(CloseMenu);
  return (
    <DropdownMenu.Portal>
      <DropdownMenu.Content
        className={className}
        onKeyDown={(event) => {
          if (event.key !== 'Tab') return;
          event.preventDefault();
          close();
        }}
        {...rest}
      />
    </DropdownMenu.Portal>
  );
}

export const MenuButton = DropdownMenu.Trigger;
export const MenuItem = DropdownMenu.Item;
export const MenuLabel = DropdownMenu.Label;
