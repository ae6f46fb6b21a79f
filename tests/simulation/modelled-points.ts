import type { ArmModel } from '../../shared/arm/model';
import {
  type Chain,
  compileChain,
  composeTransforms,
  linkFrames,
  type Transform,
} from '../../shared/kinematics';

type Point = readonly [number, number, number];

/** World positions of what the speed rule is about: joint origins, far ends of links, the tool point. */
export class ModelledPoints {
  private readonly chain: Chain;
  private readonly frames: Transform[];

  constructor(private readonly model: ArmModel) {
    this.chain = compileChain(model);
    this.frames = linkFrames(
      this.chain,
      model.joints.map(() => 0),
    );
  }

  /** m, base frame. */
  at(q: readonly number[]): Point[] {
    const frames = linkFrames(this.chain, q, this.frames);
    const points: Point[] = [];
    for (const [i, { link }] of this.model.joints.entries()) {
      const frame = frames[i]!;
      points.push([...frame.position]);
      points.push(placed(frame, link.end));
    }
    points.push(placed(frames.at(-1)!, this.model.tool.xyz));
    return points;
  }

  /** How far the point that goes farthest goes from one configuration to the next, m, as the crow flies. */
  travel(from: readonly number[], to: readonly number[]): number {
    const before = this.at(from);
    let farthest = 0;
    for (const [i, p] of this.at(to).entries()) {
      const b = before[i]!;
      farthest = Math.max(farthest, Math.hypot(p[0] - b[0], p[1] - b[1], p[2] - b[2]));
    }
    return farthest;
  }
}

function placed(frame: Transform, xyz: readonly [number, number, number]): Point {
  return composeTransforms(frame, { position: [...xyz], rotation: IDENTITY }).position;
}

const IDENTITY = Float64Array.from([1, 0, 0, 0, 1, 0, 0, 0, 1]);
