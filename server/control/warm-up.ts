import type { ArmModel } from '../../shared/arm/model';
import { compileChain, seededRandom, toolLine } from '../../shared/kinematics';
import { alongPath, blendPaths, jointPath, toolPath } from '../../shared/motion';

const ROUNDS = 40;

/**
 * Plans some lines before the first tick: the first plans of a fresh process take many times as long as later
 * ones, longer than a tick has, and the arm must not be late because somebody moves its tool for the first time.
 */
export function warmUp(model: ArmModel): void {
  const chain = compileChain(model);
  const random = seededRandom(1);
  for (let round = 0; round < ROUNDS; round++) {
    const q = model.joints.map(
      ({ limits }) => limits.lower + (0.2 + 0.6 * random()) * (limits.upper - limits.lower),
    );
    const axis = (['x', 'y', 'z', 'rz'] as const)[round % 4]!;
    const line = toolLine(chain, q, round % 2 ? 'base' : 'tool', axis, 0.3);
    const path = line && toolPath(chain, q, line, { asFar: true }).path;
    if (!path) continue;
    const end = Array.from(alongPath(path, path.length, new Float64Array(chain.n)));
    if (round % 4 === 0) blendPaths(chain, path, jointPath(chain, end, q), 0.01);
  }
}
