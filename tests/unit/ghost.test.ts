import { describe, expect, it } from 'vitest';
import { dipper } from '../../shared/arm/demo/dipper';
import { heron } from '../../shared/arm/demo/heron';
import { wren } from '../../shared/arm/demo/wren';
import type { ArmModel } from '../../shared/arm/model';
import { compileChain, forwardKinematics, toolTilt } from '../../shared/kinematics';
import { freedomOf, freedomWord } from '../../src/components/freedom';
import { ghostAt, moveGhost, turnGhost } from '../../src/features/move/ghost-pose';

const deg = (d: number) => (d * Math.PI) / 180;
const BENT: [string, ArmModel, number[]][] = [
  ['Heron', heron, [0.2, deg(60), deg(-80), deg(-40)]],
  ['Wren', wren, [0.2, deg(95), deg(-110), 0.3, deg(-50), 0.2]],
  ['Dipper', dipper, [0.3, deg(-60), -0.05, 0.2]],
];

describe('a ghost of the tool', () => {
  it.each(BENT)('of %s goes where it is put, and the arm is there', (_, model, q) => {
    const chain = compileChain(model);
    const start = ghostAt(chain, q);
    const [x, y, z] = start.position;
    const ghost = moveGhost(chain, start, { position: [x + 0.01, y - 0.02, z + 0.015] });
    expect(ghost.reached).toBe(true);
    const there = forwardKinematics(chain, ghost.q);
    for (const k of [0, 1, 2]) expect(there.position[k]).toBeCloseTo(ghost.position[k]!, 5);
    // The tool keeps what the arm can keep of how it was turned.
    if (start.tilt !== null) expect(toolTilt(chain, ghost.q)).toBeCloseTo(start.tilt, 4);
    else for (const k of [0, 4, 8]) expect(there.rotation[k]).toBeCloseTo(start.rotation[k]!, 4);
    for (const [i, { limits }] of model.joints.entries()) {
      expect(ghost.q[i]).toBeGreaterThanOrEqual(limits.lower);
      expect(ghost.q[i]).toBeLessThanOrEqual(limits.upper);
    }
  });

  it('leans where Heron tilts it, pointing outward and inward alike', () => {
    const chain = compileChain(heron);
    for (const by of [-0.2, 0.2]) {
      const start = ghostAt(chain, BENT[0]![2]);
      const ghost = moveGhost(chain, start, { tilt: start.tilt! + by });
      expect(ghost.reached).toBe(true);
      expect(toolTilt(chain, ghost.q)).toBeCloseTo(start.tilt! + by, 4);
    }
  });

  it('turns about an axis of the base in place', () => {
    const chain = compileChain(wren);
    const ghost = turnGhost(chain, ghostAt(chain, BENT[1]![2]), 'z', 0.3);
    expect(ghost.reached).toBe(true);
    const there = forwardKinematics(chain, ghost.q);
    for (const k of [0, 1, 2]) expect(there.position[k]).toBeCloseTo(ghost.position[k]!, 5);
    for (let k = 0; k < 9; k++) expect(there.rotation[k]).toBeCloseTo(ghost.rotation[k]!, 4);
  });

  it('out of reach says by how much, and the arm reaches for it', () => {
    const chain = compileChain(heron);
    const start = ghostAt(chain, BENT[0]![2]);
    const ghost = moveGhost(chain, start, { position: [2, 0, 0.2] });
    expect(ghost.reached).toBe(false);
    expect(ghost.off.position).toBeGreaterThan(1);
    const out = forwardKinematics(chain, ghost.q).position;
    expect(Math.hypot(out[0], out[1])).toBeGreaterThan(Math.hypot(start.position[0], start.position[1]));
    // Nothing is lost: put back, it is reached again.
    expect(moveGhost(chain, ghost, { position: start.position }).reached).toBe(true);
  });
});

describe('freedom of the tool', () => {
  it('is tight where the arm is stretched out, and roomy where it is bent', () => {
    const freedom = freedomOf(wren);
    const bent = freedom(BENT[1]![2]);
    const stretched = freedom([0, deg(45), deg(-5), 0, deg(-1), 0]);
    expect(freedomWord(bent.isotropy)).not.toBe('tight');
    expect(freedomWord(stretched.isotropy)).toBe('tight');
    expect(stretched.stretched).toBeGreaterThan(0.95);
    expect(bent.stretched).toBeLessThan(0.8);
  });
});
