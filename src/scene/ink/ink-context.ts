import { createContext, useContext } from 'react';
import type { InkMaterials } from './materials';

export const InkMaterialsContext = createContext<InkMaterials | null>(null);

export function useInkMaterials(): InkMaterials {
  const materials = useContext(InkMaterialsContext);
  if (!materials) throw new Error('drawn outside the scene: there are no ink materials');
  return materials;
}
