// @vitest-environment jsdom
import { fireEvent, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, it, vi } from 'vitest';
import { Dialog } from '../../src/components/Dialog';
import { Menu, MenuButton, MenuItem, MenuList } from '../../src/components/Menu';
import { useEscapeStops } from '../../src/live/use-live';

/** A page with everything that lies under a veil, and Stop. */
function Page({ onStop }: { onStop: () => void }) {
  const [open, setOpen] = useState(false);
  useEscapeStops(onStop);
  return (
    <div className="page">
      <header>
        <Menu>
          <MenuButton>Ada</MenuButton>
          <MenuList>
            <MenuItem>Settings</MenuItem>
          </MenuList>
        </Menu>
      </header>
      <p className="vh">spoken</p>
      <main>
        <button type="button" onClick={() => setOpen(true)}>
          Ask
        </button>
      </main>
      <footer className="strip">
        <div className="cell">Motors</div>
        <section className="stopcell">
          <button type="button" data-stop onClick={onStop}>
            Stop
          </button>
        </section>
      </footer>
      <Dialog open={open} onClose={() => setOpen(false)} title="Really?">
        <button type="button" onClick={() => setOpen(false)}>
          No
        </button>
      </Dialog>
    </div>
  );
}
const covered = () => [...document.querySelectorAll<HTMLElement>('*')].filter((element) => element.inert);

describe('a question above the sheet', () => {
  it('takes the focus, covers all but Stop and what is spoken, and gives both back', async () => {
    render(<Page onStop={() => {}} />);
    const person = userEvent.setup();
    const ask = screen.getByRole('button', { name: 'Ask' });
    await person.click(ask);
    expect(screen.getByRole('button', { name: 'No' })).toHaveFocus();
    expect(covered().map((part) => part.tagName + part.className)).toEqual(['HEADER', 'MAIN', 'DIVcell']);
    await person.click(screen.getByRole('button', { name: 'No' }));
    expect(covered()).toEqual([]);
    await waitFor(() => expect(ask).toHaveFocus());
  });

  it('leads Tab from its last button to Stop, and not around it', async () => {
    render(<Page onStop={() => {}} />);
    const person = userEvent.setup();
    await person.click(screen.getByRole('button', { name: 'Ask' }));
    await person.tab();
    expect(screen.getByRole('button', { name: 'Stop' })).toHaveFocus();
    await person.tab();
    expect(screen.getByRole('button', { name: 'No' })).toHaveFocus();
  });

  it('stays on Esc, which is Stop', async () => {
    const onStop = vi.fn();
    render(<Page onStop={onStop} />);
    const person = userEvent.setup();
    await person.click(screen.getByRole('button', { name: 'Ask' }));
    await person.keyboard('{Escape}');
    expect(onStop).toHaveBeenCalledOnce();
    expect(screen.getByRole('dialog', { name: 'Really?' })).toBeVisible();
  });
});

describe('a menu', () => {
  it('stays on Esc, which is Stop, and closes on Tab, back to its button', async () => {
    const onStop = vi.fn();
    render(<Page onStop={onStop} />);
    const person = userEvent.setup();
    const button = screen.getByRole('button', { name: 'Ada' });
    button.focus();
    await person.keyboard('{Enter}');
    expect(screen.getByRole('menuitem', { name: 'Settings' })).toHaveFocus();
    await person.keyboard('{Escape}');
    expect(onStop).toHaveBeenCalledOnce();
    expect(screen.getByRole('menu')).toBeVisible();
    fireEvent.keyDown(screen.getByRole('menuitem', { name: 'Settings' }), { key: 'Tab' });
    expect(screen.queryByRole('menu')).toBeNull();
    await waitFor(() => expect(button).toHaveFocus());
  });
});
