import { useOutletContext } from 'react-router-dom';
import type { Arm } from '../../shared/api/resources';

/** The arm whose sheets are open. */
export const useCurrentArm = (): Arm => useOutletContext<Arm>();
