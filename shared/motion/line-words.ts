import type { LineEnd } from './tool-path';

/** Why a straight line ends where it does, in words that name the joint. */
export function lineWords(
  names: readonly string[],
  { joint, fraction, reason }: LineEnd,
  whole: boolean,
): string {
  const name = names[joint] ?? 'a joint';
  const where = whole ? `, ${Math.floor(fraction * 100)} % of the way` : '';
  if (reason === 'limit') return `${name} comes to its soft limit${where}.`;
  if (reason === 'posture')
    return `a straight line arrives with ${name} turned otherwise: another posture of the arm.`;
  return `${name} would have to turn faster than it can: the arm is nearly stretched, folded or lined up${where}.`;
}
