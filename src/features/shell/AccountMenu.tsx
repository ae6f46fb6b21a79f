import { DropdownMenu } from 'radix-ui';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import { errorText } from '../../api/client';
import { useSession, useSignOut } from '../../api/session';
import { ChevronDown } from '../../components/icons';
import { currentTheme, toggleTheme } from '../../components/theme';
import { toast } from './toast';

export function ThemeButton() {
  const [theme, setTheme] = useState(currentTheme);
  return (
    <button type="button" className="tool" onClick={() => setTheme(toggleTheme())}>
      {theme === 'dark' ? 'Day colours' : 'Night colours'}
    </button>
  );
}

export function AccountMenu() {
  const you = useSession().data?.you;
  const signOut = useSignOut();
  if (!you) return null;
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger className="tool me">
        {you.name}
        <ChevronDown />
      </DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content className="menu-list" align="end" sideOffset={4}>
          <DropdownMenu.Label className="note">
            {you.email}, {you.role}
          </DropdownMenu.Label>
          <DropdownMenu.Item asChild>
            <Link to="/settings">Settings</Link>
          </DropdownMenu.Item>
          <DropdownMenu.Item
            onSelect={() => signOut.mutate(undefined, { onError: (error) => toast(errorText(error)) })}
          >
            Sign out everywhere
          </DropdownMenu.Item>
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
