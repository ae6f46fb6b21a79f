import { createContext, useContext, useEffect, useState } from 'react';
import { onTheme } from '../components/theme';

/** The sheet's inks for the 3D view, read from the same tokens as the page. */
export interface Inks {
  paper: string;
  card: string;
  shade: string;
  ink: string;
  ink2: string;
  ink3: string;
  edge: string;
  grid: string;
  plan: string;
  move: string;
  move2: string;
  moveEdge: string;
}

function read(): Inks {
  const style = getComputedStyle(document.documentElement);
  const token = (name: string) => style.getPropertyValue(`--er-${name}`).trim();
  return {
    paper: token('sheet'),
    card: token('card'),
    shade: token('shade'),
    ink: token('ink'),
    ink2: token('ink-2'),
    ink3: token('ink-3'),
    edge: token('edge'),
    grid: token('grid'),
    plan: token('plan'),
    move: token('move'),
    move2: token('move-2'),
    moveEdge: token('move-edge'),
  };
}

export function useReadInks(): Inks {
  const [inks, setInks] = useState(read);
  useEffect(() => onTheme(() => setInks(read())), []);
  return inks;
}

export const InksContext = createContext<Inks | null>(null);
export function useInks(): Inks {
  const inks = useContext(InksContext);
  if (!inks) throw new Error('the scene has no inks');
  return inks;
}
