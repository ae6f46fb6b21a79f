import type { Chain } from './chain';
import { ikMemory } from './ik-memory';
import { jacobian } from './jacobian';

/**
 * Singular values of a matrix, largest first, by one-sided Jacobi rotations: slow and accurate, for small
 * matrices that are looked at, not stepped with.
 *
 * @param matrix - rows × columns, row-major; left as it is
 * @returns min(rows, columns) values
 * @see Golub & Van Loan, Matrix Computations, §8.6.3 (Hestenes)
 */
export function singularValuesOf(matrix: ArrayLike<number>, rows: number, columns: number): Float64Array {
  // Vectors along the shorter side, so that no zero values have to be dropped afterwards.
  const wide = columns > rows;
  const [count, length] = wide ? [rows, columns] : [columns, rows];
  const vectors = Array.from({ length: count }, (_, j) =>
    Float64Array.from({ length }, (_, i) => (wide ? matrix[j * columns + i] : matrix[i * columns + j])!),
  );
  for (let sweep = 0; sweep < 60; sweep++) if (!orthogonaliseOnce(vectors)) break;
  return Float64Array.from(vectors, (v) => Math.hypot(...v)).sort((a, b) => b - a);
}

/** One sweep over all pairs; false when every pair was already at right angles to rounding. */
function orthogonaliseOnce(vectors: Float64Array[]): boolean {
  let turned = false;
  for (let p = 0; p < vectors.length; p++)
    for (let r = p + 1; r < vectors.length; r++) {
      const u = vectors[p]!;
      const v = vectors[r]!;
      let uu = 0;
      let vv = 0;
      let uv = 0;
      for (let k = 0; k < u.length; k++) {
        uu += u[k]! * u[k]!;
        vv += v[k]! * v[k]!;
        uv += u[k]! * v[k]!;
      }
      if (uv === 0 || Math.abs(uv) <= 1e-16 * Math.sqrt(uu * vv)) continue;
      turned = true;
      const zeta = (vv - uu) / (2 * uv);
      const t = (zeta < 0 ? -1 : 1) / (Math.abs(zeta) + Math.sqrt(1 + zeta * zeta));
      const c = 1 / Math.sqrt(1 + t * t);
      for (let k = 0; k < u.length; k++) {
        const before = u[k]!;
        u[k] = c * (before - t * v[k]!);
        v[k] = c * (t * before + v[k]!);
      }
    }
  return turned;
}

/** How freely the tool can move in configuration q. */
export interface Dexterity {
  /** Of the 6×n Jacobian, largest first; m and rad mixed as they are. */
  singularValues: Float64Array;
  /** Product of the singular values: 0 in a singular configuration (Yoshikawa's manipulability). */
  manipulability: number;
  /** Product of the singular values of the position rows alone. */
  translationManipulability: number;
  /** Smallest singular value of the position rows over the largest: 0 (a direction is lost) … 1 (all alike). Fewer than three joints: of as many directions. */
  translationIsotropy: number;
  /**
   * The same of all that the tool can do, 0 … 1: how far the arm is from a place where it loses a way to move or
   * turn its tool. Lengths count in arm lengths; arms with fewer than six joints are judged by the ways they have.
   */
  isotropy: number;
}

/** @see Siciliano et al., Robotics: Modelling, Planning and Control, §3.9 (manipulability ellipsoids) */
export function dexterity(chain: Chain, q: ArrayLike<number>): Dexterity {
  const j = jacobian(chain, q);
  const singularValues = singularValuesOf(j, 6, chain.n);
  const ofPosition = singularValuesOf(j.subarray(0, 3 * chain.n), 3, chain.n);
  const product = (values: Float64Array) => values.reduce((a, b) => a * b, 1);
  const largest = ofPosition[0]!;
  return {
    singularValues,
    manipulability: product(singularValues),
    translationManipulability: product(ofPosition),
    translationIsotropy: largest > 0 ? ofPosition[ofPosition.length - 1]! / largest : 0,
    isotropy: isotropyOf(chain, j),
  };
}

function isotropyOf(chain: Chain, j: Float64Array): number {
  const { perLength, unit } = ikMemory(chain);
  const { n } = chain;
  const scaled = j.map((value, k) => value * unit[k % n]! * (k < 3 * n ? perLength : 1));
  const values = singularValuesOf(scaled, 6, n);
  const ways = Math.min(6, n);
  return values[0]! > 0 ? values[ways - 1]! / values[0]! : 0;
}
