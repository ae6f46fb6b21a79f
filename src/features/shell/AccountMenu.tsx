import { useState } from 'react';
import { Link } from 'react-router-dom';
import { errorText } from '../../api/client';
import { useSession, useSignOut } from '../../api/session';
import { ChevronDown } from '../../components/icons';
import { Menu, MenuButton, MenuItem, MenuLabel, MenuList } from '../../components/Menu';
import { currentTheme, toggleTheme } from '../../components/theme';
import { toast } from '../../components/toast';

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
    <Menu>
      <MenuButton className="tool me">
        {you.name}
        <ChevronDown />
      </MenuButton>
      <MenuList align="end" sideOffset={4}>
        <MenuLabel className="note">
          {you.email}, {you.role}
        </MenuLabel>
        <MenuItem asChild>
          <Link to="/settings">Settings</Link>
        </MenuItem>
        <MenuItem onSelect={() => signOut.mutate(undefined, { onError: (error) => toast(errorText(error)) })}>
          Sign out everywhere
        </MenuItem>
      </MenuList>
    </Menu>
  );
}
