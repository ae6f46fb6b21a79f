import { describe, expect, it } from 'vitest';
import { compileChain, followLine } from '../../shared/kinematics';
import { type ArmDescription, modelOf } from './arm-data';
import file from './line-puma-560.json';

interface Move {
  q_start: number[];
  p_end: number[];
  R_end: number[][];
  possible: boolean;
  q_at_tenths?: number[][];
  first_bad_fraction?: number;
  why?: string;
}
const chain = compileChain(modelOf(file as unknown as ArmDescription));
const moves = file.moves as unknown as Move[];
const follow = (move: Move) =>
  followLine(chain, move.q_start, { position: move.p_end, rotation: move.R_end.flat() });

describe('straight tool moves of the PUMA 560', () => {
  it('go through the joint values of the reference at every tenth, to 1e-6 rad', () => {
    const possible = moves.filter((move) => move.possible);
    expect(possible).toHaveLength(15);
    for (const move of possible) {
      const { path } = follow(move);
      move.q_at_tenths!.forEach((expected, tenth) => {
        const at = (tenth * path!.samples) / 10;
        expected.forEach((value, i) => {
          expect(Math.abs(path!.q[at * chain.n + i]! - value)).toBeLessThan(1e-6);
        });
      });
    }
  });

  it('are refused at the fraction and for the joint of the reference', () => {
    const impossible = moves.filter((move) => !move.possible);
    expect(impossible).toHaveLength(8);
    for (const move of impossible) {
      const { refusal } = follow(move);
      expect(refusal?.reason).toBe('limit');
      expect(`limit ${chain.names[refusal!.joint]}`).toBe(move.why);
      // The reference is the first bad point of a grid of 1/500: the true place is up to one step before it.
      expect(refusal!.fraction).toBeLessThanOrEqual(move.first_bad_fraction!);
      expect(refusal!.fraction).toBeGreaterThan(move.first_bad_fraction! - 1 / 500 - 1e-5);
    }
  });
});
