import type { ArmModel } from '../arm/model';
import type { ProgramStep } from './program';

/**
 * A short name for "these very steps on this very arm": equal input, equal text. An approval and a
 * watched first cycle hold only for the fingerprint they were given for. It tells change from no change;
 * it is no protection against somebody who wants two inputs to look alike.
 */
export function fingerprint(steps: readonly ProgramStep[], model: ArmModel): string {
  const { joints, tool, gripper, gravity, payload } = model;
  return hash64(JSON.stringify([steps, { joints, tool, gripper, gravity, payload }]));
}

/**
 * FNV-1a over UTF-16 code units, in two 32-bit lanes with different offsets.
 * @see Fowler, Noll, Vo; IETF draft-eastlake-fnv: prime 16777619, offset basis 2166136261.
 */
function hash64(text: string): string {
  let a = 2166136261;
  let b = 2166136261 ^ 0x5bd1e995;
  for (let i = 0; i < text.length; i++) {
    const unit = text.charCodeAt(i);
    a = Math.imul(a ^ (unit & 0xff), 16777619);
    a = Math.imul(a ^ (unit >>> 8), 16777619);
    b = Math.imul(b ^ (unit >>> 8), 16777619);
    b = Math.imul(b ^ (unit & 0xff), 16777619);
  }
  return (a >>> 0).toString(16).padStart(8, '0') + (b >>> 0).toString(16).padStart(8, '0');
}
