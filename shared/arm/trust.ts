import { z } from 'zod';

/** How far a joint's shown position can be believed. Least first. */
export const TRUST_LEVELS = ['unknown', 'doubtful', 'declared', 'referenced'] as const;
export const Trust = z.enum(TRUST_LEVELS);
export type Trust = z.infer<typeof Trust>;

/** The arm's trust is its worst joint's. */
export function worstTrust(trust: readonly Trust[]): Trust {
  let worst: Trust = 'referenced';
  for (const t of trust) if (TRUST_LEVELS.indexOf(t) < TRUST_LEVELS.indexOf(worst)) worst = t;
  return trust.length === 0 ? 'unknown' : worst;
}

/** The highest ceiling (share of each joint's speed limit) that a trust allows. */
export function trustCeiling(trust: Trust): number {
  return trust === 'referenced' ? CEILINGS.full : trust === 'declared' ? CEILINGS.easy : CEILINGS.creep;
}

/** The named ceilings, as a share of each joint's own speed limit. */
export const CEILINGS = { creep: 0.05, easy: 0.25, full: 1 } as const;
