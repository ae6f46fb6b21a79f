/** Where the arm is seen from. */
export type View = 'corner' | 'side' | 'above';
