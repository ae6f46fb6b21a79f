import './shell.css';
import type { ReactNode } from 'react';
import { Link, NavLink, useNavigate } from 'react-router-dom';
import { useArms } from '../../api/arms';
import { useSession } from '../../api/session';
import { BrandMark, ChevronDown, MenuIcon } from '../../components/icons';
import { Menu, MenuButton, MenuItem, MenuList } from '../../components/Menu';
import { toggleTheme } from '../../components/theme';
import { AccountMenu, ThemeButton } from './AccountMenu';

export interface Tab {
  to: string;
  label: string;
}

/** Brand, where we are, the index-card tabs, and the person. On a phone the tabs fold into a menu. */
export function Header({
  tabs,
  arm,
  tools,
  phoneAction,
}: {
  tabs: Tab[];
  arm?: { id: string; name: string };
  tools?: ReactNode;
  phoneAction?: ReactNode;
}) {
  const workshop = useSession().data?.workshop ?? '';
  const navigate = useNavigate();
  return (
    <header className="top">
      <Link className="brand" to="/" aria-label="Elbowroom, all arms">
        <BrandMark />
        <span>Elbowroom</span>
      </Link>
      <div className="where">
        {arm ? (
          <>
            <span className="team">{workshop}</span>
            <span className="sl" aria-hidden="true">
              /
            </span>
            <ArmSwitch arm={arm} />
          </>
        ) : (
          <b>{workshop}</b>
        )}
      </div>
      <nav className="tabs" aria-label={arm ? `Sheets of ${arm.name}` : 'Sheets of the workshop'}>
        {tabs.map((tab) => (
          <NavLink key={tab.to} to={tab.to} end={tab.to === '/'}>
            {tab.label}
          </NavLink>
        ))}
      </nav>
      <div className="tools">
        {tools}
        <ThemeButton />
        <AccountMenu />
      </div>
      {phoneAction}
      <Menu>
        <MenuButton className="menu" aria-label="Sheets">
          <MenuIcon />
        </MenuButton>
        <MenuList align="end" sideOffset={4}>
          {tabs.map((tab) => (
            <MenuItem key={tab.to} onSelect={() => navigate(tab.to)}>
              {tab.label}
            </MenuItem>
          ))}
          <MenuItem onSelect={() => navigate('/')}>All arms</MenuItem>
          <MenuItem onSelect={() => toggleTheme()}>Day or night colours</MenuItem>
          <MenuItem onSelect={() => navigate('/settings')}>Settings and sign-out</MenuItem>
        </MenuList>
      </Menu>
    </header>
  );
}

function ArmSwitch({ arm }: { arm: { id: string; name: string } }) {
  const arms = useArms().data ?? [];
  const navigate = useNavigate();
  return (
    <Menu>
      <MenuButton aria-label={`${arm.name}, choose another arm`}>
        <b>{arm.name}</b>
        <ChevronDown />
      </MenuButton>
      <MenuList align="start" sideOffset={4}>
        {arms.map((other) => (
          <MenuItem key={other.id} onSelect={() => navigate(`/arms/${other.id}/move`)}>
            {other.name}
            <span className="note">{other.motors ?? ''}</span>
          </MenuItem>
        ))}
        <MenuItem onSelect={() => navigate('/')}>All arms</MenuItem>
      </MenuList>
    </Menu>
  );
}
