import { create } from 'zustand';
import type { Ghost } from './ghost-pose';

/** The ghost of the tool, shared by its rows and the drawing; null while nobody places one. */
export const useGhost = create<{ ghost: Ghost | null }>(() => ({ ghost: null }));
