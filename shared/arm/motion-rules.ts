/** Figures of the rules of motion that several rooms share. SI units. */

/** ISO 10218-1: the tool centre point at most 250 mm/s in manual reduced-speed mode; here for every modelled point. */
export const POINT_SPEED_M_S = 0.25;
/** Our own stricter figure at creep and while the position is not known. */
export const POINT_SPEED_CREEP_M_S = 0.05;
/** The gripper moves at this share of what its servo could do. */
export const GRIPPER_PACE = 0.6;
/** Fingers closer than this share of their opening are taken to carry the arm's payload. */
export const CARRIES_BELOW = 0.6;
