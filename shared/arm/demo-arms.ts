import { dipper } from './demo/dipper';
import { heron } from './demo/heron';
import { wren } from './demo/wren';
import type { ArmModel } from './model';

/** The three arms of the demo workshop, also the starting points for a new arm. */
export const DEMO_ARMS: Record<'heron' | 'wren' | 'dipper', ArmModel> = { heron, wren, dipper };
